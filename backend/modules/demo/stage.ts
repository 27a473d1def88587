import { RequestContext, type EntityManager } from '@mikro-orm/postgresql';
import type { Operation, StampStepBody } from '#schemas/api/capture.ts';
import type { EntryValue } from '#schemas/instruments/entry-values.ts';
import { runAs } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { Problem } from '#backend/http/problem.ts';
import { loadActor } from '#backend/http/session/load-actor.ts';
import { completeEntry, openStepEntry, saveEntry, stampStep } from '../capture/index.ts';

/** A number with the digits it is written with, as a person would type it. */
export interface Typed {
  value: number;
  written: string;
}

/** `typed(2.4, 2)` is 2.4 written 2.40. */
export const typed = (value: number, decimals: number): Typed => {
  const written = value.toFixed(decimals);
  return { value: Number(written), written };
};

export type Filled = Record<string, EntryValue | Typed>;

/** Someone on the demo's stage: does what people do, through the same acts. */
export class Player {
  constructor(
    readonly deps: Deps,
    readonly personId: string,
    readonly membershipId: string | null,
  ) {}

  /** Runs work as this person, with an entity manager of its own, as a request would. */
  async does<T>(work: (em: EntityManager) => Promise<T>): Promise<T> {
    const { orm } = this.deps;
    return RequestContext.create(orm.em.fork(), async () => {
      const loaded = await loadActor(orm.em, this.personId, this.membershipId);
      if (loaded === null) throw new Error('A person of the demo cannot act.');
      return runAs(loaded.actor, () => work(orm.em));
    });
  }

  /** Fills a step in and completes it; what a soft check asks is confirmed, as people do. */
  async fill(visitId: string, stepKey: string, values: Filled, { complete = true } = {}): Promise<string> {
    const { entry } = await this.does((em) => openStepEntry(em, visitId, stepKey));
    const saved = await this.#save(stepKey, entry, values);
    if (complete) await this.does((em) => completeEntry(em, entry.id, saved, {}, null));
    return entry.id;
  }

  /** Stamps a press on the run sheet. */
  async stamp(visitId: string, body: StampStepBody): Promise<void> {
    await this.does((em) => stampStep(em, visitId, body));
  }

  async #save(stepKey: string, entry: { id: string; revision: number }, values: Filled): Promise<number> {
    const confirmations: { checkId: string; reason: string }[] = [];
    let pending = Object.entries(values).map(([pointer, value]) => operationOf(pointer, value));
    let { revision } = entry;
    for (let round = 0; pending.length > 0; round += 1) {
      const before = revision;
      const refused = await this.does((em) =>
        saveEntry(em, entry.id, before, { operations: pending, confirmations }, null).then(
          (loaded) => {
            revision = loaded.entry.revision;
            return loaded.refused.map(({ change, finding }) => ({ pointer: change.address, ...finding }));
          },
          (error: unknown) => refusedOf(error),
        ),
      );
      const hard = refused.filter(({ severity }) => severity === 'hard');
      if (hard.length > 0 || round > 4) {
        throw new Error(
          `The demo does not pass ${stepKey}: ${refused.map(({ checkId }) => checkId).join(', ')}`,
        );
      }
      for (const { checkId } of refused) confirmations.push({ checkId, reason: 'Read twice, it is so' });
      const again = new Set(refused.map(({ pointer }) => pointer));
      pending = pending.filter(({ pointer }) => again.has(pointer));
    }
    return revision;
  }
}

interface Refused {
  pointer: string;
  checkId: string;
  severity: string;
}

/** All values of a request turned away come as a problem. */
function refusedOf(error: unknown): Refused[] {
  if (error instanceof Problem && error.slug === 'fields-refused') return error.extra['refused'] as Refused[];
  throw error instanceof Problem ? new Error(`${error.message} ${JSON.stringify(error.errors)}`) : error;
}

function operationOf(pointer: string, value: EntryValue | Typed): Operation {
  if (typeof value !== 'object' || Array.isArray(value)) return { pointer, value };
  return 'missing' in value ? { pointer, missing: value.missing } : { pointer, ...value };
}
