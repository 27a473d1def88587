import type { Knex } from '@mikro-orm/postgresql';
import type { Pool } from 'pg';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { Problem } from './problem.ts';

export interface RateLimit {
  /** Takes one point; 429 with the seconds to wait when none is left. */
  take: (key: string) => Promise<void>;
  /** Gives the points back: the right password ends the counting. */
  forget: (key: string) => Promise<void>;
}

/** Counts in PostgreSQL, shared by all processes and kept over a restart (WS-03). */
export function rateLimit(
  store: Pool | Knex,
  name: string,
  { points, seconds }: { points: number; seconds: number },
): RateLimit {
  const limiter = new RateLimiterPostgres({
    storeClient: store,
    storeType: 'totalCount' in store ? 'pool' : 'knex',
    tableName: 'rate_limit',
    tableCreated: true,
    keyPrefix: name,
    points,
    duration: seconds,
  });
  return {
    take: async (key) => {
      try {
        await limiter.consume(key);
      } catch (error) {
        if (!(error instanceof RateLimiterRes)) throw error;
        const wait = Math.max(1, Math.ceil(error.msBeforeNext / 1000));
        throw new Problem(429, 'try-again-later', `Too many tries. Try again in ${wait} s.`, [], {
          retryAfter: wait,
        });
      }
    },
    forget: async (key) => {
      await limiter.delete(key);
    },
  };
}
