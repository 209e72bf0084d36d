import type { Logger } from 'pino';
import { Redis } from 'ioredis';

/** Nobody answers at REDIS_URL. */
export class RedisUnreachable extends Error {
  override readonly name = 'RedisUnreachable';
}

const CONNECT_TIMEOUT_MS = 5_000;
const LONGEST_PAUSE_MS = 2_000;

/**
 * Connects to the Redis of the queue. Once connected, a lost connection is taken up again for as long as it takes.
 * @throws RedisUnreachable when it is not there at the start
 */
export async function connectRedis(url: string, logger: Logger): Promise<Redis> {
  const redis = new Redis(url, {
    lazyConnect: true,
    connectTimeout: CONNECT_TIMEOUT_MS,
    // BullMQ waits on this connection for as long as there is nothing to do.
    maxRetriesPerRequest: null,
    retryStrategy: (attempt) => Math.min(100 * attempt, LONGEST_PAUSE_MS),
  });
  let lastError: Error | null = null;
  redis.on('error', (error: Error) => {
    lastError = error;
    logger.warn({ err: error }, 'the connection to Redis has a fault; it is tried again');
  });
  try {
    await redis.connect();
  } catch (error) {
    redis.disconnect();
    const { host = '', port = '' } = redis.options;
    const reason = lastError ?? (error instanceof Error ? error : new Error(String(error)));
    throw new RedisUnreachable(`REDIS_URL: no Redis answers at ${host}:${port} (${reason.message}).`);
  }
  return redis;
}
