import type { EntityManager } from '@mikro-orm/postgresql';
import { createHash } from 'node:crypto';
import type { Request } from 'express';
import { currentPersonId } from './actor.ts';
import { Problem } from './problem.ts';

/** A key the client chose for one request, and the hash of what it asked. */
export interface IdempotencyKey {
  key: string;
  bodyHash: string;
}

/** Reads `Idempotency-Key`; null when the client sent none. */
export function idempotencyKey(request: Request): IdempotencyKey | null {
  const key = request.get('Idempotency-Key');
  if (key === undefined) return null;
  if (!/^[\w-]{8,64}$/.test(key)) {
    throw new Problem(400, 'invalid-parameter', 'Idempotency-Key must be 8 to 64 letters, digits, - or _.');
  }
  const asked = `${request.method} ${request.path} ${JSON.stringify(request.body ?? null)}`;
  return { key, bodyHash: createHash('sha256').update(asked).digest('hex') };
}

/** Whether this very request was carried out before; the same key for another request is refused (DE-04). */
export async function seenBefore(em: EntityManager, key: IdempotencyKey | null): Promise<boolean> {
  if (key === null) return false;
  const [row] = await em.execute<{ body_hash: string }[]>(
    'select body_hash from idempotency_key where person_id = ? and key = ?',
    [currentPersonId(), key.key],
  );
  if (row === undefined) return false;
  if (row.body_hash !== key.bodyHash) {
    throw new Problem(
      422,
      'key-reused',
      'This Idempotency-Key belongs to another request; choose a new one.',
    );
  }
  return true;
}

/** True for the error of two identical requests at the same instant: the other one did it. */
export const lostToTwin = (error: unknown): boolean =>
  (error as { code?: string; constraint?: string }).code === '23505' &&
  (error as { constraint?: string }).constraint === 'idempotency_key_pkey';
