import type { EntityManager } from '@mikro-orm/postgresql';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { DerivedValue } from '#schemas/instruments/derive-values.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import type { Level } from '#schemas/vocabulary/states.ts';
import { canonicalForm, canonicalHash } from '#backend/database/trail/canonical.ts';
import { recordChange, recordRevision } from '#backend/database/trail/act-context.ts';
import { recordedValue, type Derivation } from '#backend/database/trail/recorded-value.ts';
import { CheckOutcomeSchema, type ContentItem, type Entry } from './entry.entity.ts';
import type { StoredValue } from './entry-values.ts';
import type { Change, Judged, SavePlan } from './plan-save.ts';

/** Values of an entry stand apart from the entry's own columns. */
export const entryValueSubject = 'entry-value';

/** The hash that signatures, marks and cuts bind to: over the commitments, in the order of their addresses. */
export const contentHashOf = (content: Record<string, ContentItem>): string =>
  canonicalHash(
    Object.fromEntries(Object.entries(content).map(([address, item]) => [address, item.commitment])),
  );

const levelOf = (compiled: CompiledInstrument, address: string): Level =>
  compiled.field(parseAddress(address)?.pointer ?? '')?.level ?? 'open';

/**
 * Stores what a save decided, inside its act: values, derived values, outcomes of checks, the entry's next revision.
 * @returns the addresses that changed, derived ones included
 */
export function storeSave(
  tx: EntityManager,
  entry: Entry,
  compiled: CompiledInstrument,
  plan: SavePlan,
  before: readonly StoredValue[],
): string[] {
  const content: Record<string, ContentItem> = { ...entry.content };
  const changes: Record<string, ContentItem | null> = {};
  const put = (change: Change, derivation: Derivation | null): string => {
    const record = recordedValue({
      subjectType: entryValueSubject,
      subjectId: entry.id,
      address: change.address,
      value: change.value,
      written: change.written,
      level: levelOf(compiled, change.address),
      derivation,
    });
    recordChange(record, content[change.address]?.commitment ?? null);
    if (change.value === null) {
      delete content[change.address];
      changes[change.address] = null;
    } else {
      content[change.address] = changes[change.address] = { value: record.id, commitment: record.commitment };
    }
    return record.id;
  };

  const valueIds = new Map<string, string>();
  for (const change of plan.stored) valueIds.set(change.address, put(change, null));
  for (const change of derivedChanges(plan.derived, before))
    put(change, derivationOf(plan.derived, change, content));
  recordOutcomes(tx, entry, compiled, plan, valueIds);

  const addresses = Object.keys(changes);
  if (addresses.length === 0) return [];
  entry.content = content;
  entry.contentHash = contentHashOf(content);
  recordRevision({
    entryId: entry.id,
    revision: entry.revision + 1,
    contentHash: entry.contentHash,
    changes,
  });
  return addresses;
}

/** Derived values that are other than before; an unchanged one keeps its record. */
function derivedChanges(derived: Record<string, DerivedValue>, before: readonly StoredValue[]): Change[] {
  const known = new Map(before.map((value) => [value.address, value]));
  return Object.entries(derived).flatMap(([address, result]): Change[] => {
    const old = known.get(address);
    if (!('value' in result)) return old === undefined ? [] : [{ address, value: null, written: null }];
    const same =
      old !== undefined &&
      canonicalForm(old.value) === canonicalForm(result.value) &&
      old.derivation?.version === result.rule.version &&
      canonicalForm(old.derivation.cautions) === canonicalForm(result.cautions.map(({ code }) => code));
    return same ? [] : [{ address, value: result.value, written: null }];
  });
}

function derivationOf(
  derived: Record<string, DerivedValue>,
  change: Change,
  content: Record<string, ContentItem>,
): Derivation | null {
  const result = derived[change.address];
  if (result === undefined || !('value' in result)) return null;
  const inputs = Object.entries(content).flatMap(([address, item]) =>
    result.inputs.includes(parseAddress(address)?.pointer ?? '') ? [item.value] : [],
  );
  return {
    rule: result.rule.id,
    version: result.rule.version,
    inputs,
    cautions: result.cautions.map(({ code }) => code),
  };
}

/** What checks said stays on record with the value they said it of (AT-09). */
function recordOutcomes(
  tx: EntityManager,
  entry: Entry,
  compiled: CompiledInstrument,
  plan: SavePlan,
  valueIds: ReadonlyMap<string, string>,
): void {
  const outcome = ({ change, finding, reason }: Judged, valueId: string): void => {
    tx.create(CheckOutcomeSchema, {
      studyId: entry.studyId,
      entryId: entry.id,
      address: change.address,
      checkId: finding.checkId,
      instrumentVersionId: entry.instrumentVersionId,
      severity: finding.severity,
      valueId,
      outcome: reason !== null ? 'confirmed' : finding.severity === 'hard' ? 'refused' : 'asked',
      reason,
      level: finding.level,
      at: new Date(),
    });
  };
  const submitted = new Map<string, string>();
  for (const judged of plan.refused) {
    const { address, value, written } = judged.change;
    let valueId = submitted.get(address);
    if (valueId === undefined) {
      const level = levelOf(compiled, address);
      const record = recordedValue({
        subjectType: entryValueSubject,
        subjectId: entry.id,
        address,
        value,
        written,
        level,
      });
      recordChange(record, null);
      valueId = record.id;
      submitted.set(address, valueId);
    }
    outcome(judged, valueId);
  }
  for (const judged of plan.confirmed) {
    const valueId = valueIds.get(judged.change.address);
    if (valueId !== undefined) outcome(judged, valueId);
  }
}
