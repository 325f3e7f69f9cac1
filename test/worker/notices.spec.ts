import Redis from 'ioredis';
import type { Notice } from '../../api/domain/shared/stream';
import type { Notices } from '../../api/queue/notices';
import { redisNotices } from '../../api/queue/redis-notices';
import { createTestRedis, type TestRedis } from '../support/redis';

describe('notices between processes', () => {
  const opened: Notices[] = [];
  const redises: TestRedis[] = [];
  const troubles: unknown[] = [];
  afterAll(async () => {
    for (const board of opened) await board.close();
    for (const redis of redises) await redis.drop();
  });
  const redis = async (): Promise<TestRedis> => {
    const made = await createTestRedis();
    redises.push(made);
    return made;
  };
  const board = (url: string): { notices: Notices; heard: Notice[] } => {
    const notices = redisNotices(url, (error) => troubles.push(error));
    const heard: Notice[] = [];
    opened.push(notices);
    notices.subscribe((notice) => heard.push(notice));
    return { notices, heard };
  };
  /** Publishes until the other side has subscribed and heard. */
  const sayUntilHeard = async (from: Notices, to: Notice[], notice: Notice): Promise<void> => {
    for (const end = Date.now() + 10_000; !to.some(({ id }) => id === notice.id); ) {
      if (Date.now() > end) throw new Error('nothing was heard');
      await from.publish(notice);
      await new Promise((resolve) => setTimeout(resolve, 30));
    }
  };

  it('reach every process of the house, and none of another that shares the Redis', async () => {
    const [ours, theirs] = [await redis(), await redis()];
    const [a, b, other] = [board(ours.url), board(ours.url), board(theirs.url)];
    await sayUntilHeard(other.notices, other.heard, { topic: 'run', id: 'theirs' });
    await sayUntilHeard(a.notices, b.heard, { topic: 'run', id: 'ours', state: 'running', progress: { done: 1, total: 2, doing: 'drawing' } });
    expect(b.heard).toContainEqual({ topic: 'run', id: 'ours', state: 'running', progress: { done: 1, total: 2, doing: 'drawing' } });
    expect(other.heard.map(({ id }) => id)).not.toContain('ours');
    expect(b.heard.map(({ id }) => id)).not.toContain('theirs');
  });

  it('outlive rubbish on their channel, and report it', async () => {
    const { url } = await redis();
    const { notices, heard } = board(url);
    await sayUntilHeard(notices, heard, { topic: 'run', id: 'before' });
    troubles.length = 0;
    const stranger = new Redis(url);
    const channels = await stranger.pubsub('CHANNELS', `leanyear:${new URL(url).pathname.slice(1)}:*`);
    expect(channels).toHaveLength(1);
    for (const rubbish of ['not json', '{"topic":"weather","id":"1"}']) await stranger.publish(String(channels[0]), rubbish);
    stranger.disconnect();
    await sayUntilHeard(notices, heard, { topic: 'run', id: 'after' });
    expect(troubles).toHaveLength(2);
    expect(heard.filter(({ id }) => id !== 'before' && id !== 'after')).toEqual([]);
  });
});
