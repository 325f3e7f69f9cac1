import Redis from 'ioredis';
import { z } from 'zod';
import type { Notice } from '../domain/shared/stream';
import { ROLES, STREAM_TOPICS } from '../domain/vocabulary';
import type { Notices } from './notices';

/** Redis keeps channels apart from its numbered databases; houses that share a Redis must not hear each other. */
const channelOf = (redisUrl: string): string => `leanyear:${new URL(redisUrl).pathname.slice(1) || '0'}:notices`;
const notice = z.object({
  topic: z.enum(STREAM_TOPICS),
  id: z.string(),
  progress: z.object({ done: z.number(), total: z.number(), doing: z.string() }).optional(),
  state: z.string().optional(),
  roles: z.array(z.enum(ROLES)).optional(),
});

function parse(text: string): ReturnType<typeof notice.safeParse> {
  try {
    return notice.safeParse(JSON.parse(text));
  } catch {
    return notice.safeParse(text);
  }
}

/** A notice board between processes, on Redis publish/subscribe. Losing a notice loses nothing, so trouble is only reported. */
export function redisNotices(redisUrl: string, onTrouble: (error: unknown) => void): Notices {
  const options = { maxRetriesPerRequest: 1, enableOfflineQueue: false, retryStrategy: (attempt: number) => Math.min(200 * attempt, 2000) };
  const channel = channelOf(redisUrl);
  const sender = new Redis(redisUrl, options);
  const receiver = new Redis(redisUrl, { ...options, maxRetriesPerRequest: null, enableOfflineQueue: true });
  const listeners = new Set<(heard: Notice) => void>();
  sender.on('error', onTrouble);
  receiver.on('error', onTrouble);
  receiver.subscribe(channel).catch(onTrouble);
  receiver.on('message', (_channel, text) => {
    const parsed = parse(text);
    if (parsed.success) for (const listener of listeners) listener(parsed.data as Notice);
    else onTrouble(parsed.error);
  });
  return {
    async publish(said) {
      try {
        await sender.publish(channel, JSON.stringify(said));
      } catch (error) {
        onTrouble(error);
      }
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    async check() {
      await sender.ping();
    },
    close() {
      sender.disconnect();
      receiver.disconnect();
      return Promise.resolve();
    },
  };
}
