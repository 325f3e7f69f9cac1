import { bullmqQueue } from '../../api/queue/bullmq';
import { wakeQueueContract } from '../../api/queue/queue.contract-suite';
import { createTestRedis } from '../support/redis';

wakeQueueContract('BullMQ on Redis', async () => {
  const redis = await createTestRedis();
  const queue = bullmqQueue(redis.url);
  return {
    queue,
    async close() {
      await queue.close();
      await redis.drop();
    },
  };
});

describe('BullMQ without its Redis', () => {
  it('rejects a wake soon, so that its row stays in the outbox', async () => {
    const queue = bullmqQueue('redis://127.0.0.1:1');
    const since = Date.now();
    await expect(queue.add({ id: 'x', topic: 'mail.send', subjectId: '1' })).rejects.toThrow();
    expect(Date.now() - since).toBeLessThan(5000);
    await queue.close();
  });
});
