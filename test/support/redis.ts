import Redis from 'ioredis';
import { testVariable } from './environment';

export interface TestRedis {
  /** A numbered database that no other test file uses. */
  readonly url: string;
  readonly drop: () => Promise<void>;
}

async function onRedis<T>(url: string, work: (redis: Redis) => Promise<T>): Promise<T> {
  const redis = new Redis(url, { lazyConnect: true });
  try {
    await redis.connect();
    return await work(redis);
  } finally {
    redis.disconnect();
  }
}

/** An empty numbered database of the run's Redis; database 0 only counts them. */
export async function createTestRedis(): Promise<TestRedis> {
  const base = testVariable('TEST_REDIS_URL');
  const number = await onRedis(base, (redis) => redis.incr('test databases'));
  const url = new URL(base);
  url.pathname = `/${number}`;
  return {
    url: url.href,
    drop: () => onRedis(url.href, async (redis) => void (await redis.flushdb())),
  };
}
