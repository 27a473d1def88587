import { ChangeSetType, type ChangeSet, type EntityManager } from '@mikro-orm/postgresql';
import { auditRuleOf, type AuditRule } from '../audited.ts';
import { canonicalHash } from './canonical.ts';
import type { EventChange } from './event-form.ts';
import { recordedValue, type RecordedValue } from './recorded-value.ts';

/** The form a column's value takes in the trail; undefined leaves it out. */
function trailValue(rule: AuditRule, column: string, value: unknown): unknown {
  const how = column === 'id' ? 'skip' : (rule.columns[column] ?? 'plain');
  if (how === 'skip' || value === undefined) return undefined;
  if (value === null) return null;
  if (how === 'presence') return { written: true };
  const plain =
    value instanceof Date
      ? value.toISOString()
      : value instanceof Uint8Array
        ? Buffer.from(value).toString('hex')
        : value;
  return how === 'digest' ? { sha256: canonicalHash(plain) } : plain;
}

function subjectIdOf(changeSet: ChangeSet<object>): string {
  const entity = changeSet.entity as { id?: string; participantId?: string };
  const key = entity.id ?? entity.participantId;
  if (key === undefined) throw new Error(`${changeSet.name} has no key the trail could name.`);
  return key;
}

function assertOwnStudy(changeSet: ChangeSet<object>, rule: AuditRule, studyId: string): void {
  const entity = changeSet.entity as { studyId?: string | null };
  if (rule.chain === 'study' && entity.studyId !== studyId) {
    throw new Error(`${changeSet.name} of another study was changed.`);
  }
}

/**
 * Turns the flushed change sets of ordinary tables into recorded values and changes.
 * The old commitment is the newest one at the same address: the row's lock is held, so it cannot move.
 */
export async function columnChanges(
  tx: EntityManager,
  studyId: string,
  changeSets: readonly ChangeSet<object>[],
): Promise<{ values: RecordedValue[]; changes: EventChange[] }> {
  const values: RecordedValue[] = [];
  const updated = new Set<string>();
  for (const changeSet of changeSets) {
    const rule = auditRuleOf(changeSet.name);
    if (rule === undefined) continue;
    assertOwnStudy(changeSet, rule, studyId);
    const subjectId = subjectIdOf(changeSet);
    for (const [column, raw] of Object.entries(changeSet.payload as Record<string, unknown>)) {
      const value = trailValue(rule, column, raw);
      if (value === undefined || (value === null && changeSet.type === ChangeSetType.CREATE)) continue;
      const level = rule.columns[column] === 'unblinding' ? 'unblinding' : 'open';
      values.push(
        recordedValue({ subjectType: rule.subject, subjectId, address: `/${column}`, value, level }),
      );
      if (changeSet.type !== ChangeSetType.CREATE) updated.add(subjectId);
    }
  }
  const old =
    updated.size === 0 ? new Map<string, string>() : await newestCommitments(tx, studyId, [...updated]);
  const changes = values.map((value) => ({
    subject: `${value.subjectType}/${value.subjectId}`,
    address: value.address,
    old: old.get(`${value.subjectType}/${value.subjectId}${value.address}`) ?? null,
    new: value.commitment,
  }));
  return { values, changes };
}

async function newestCommitments(
  tx: EntityManager,
  studyId: string,
  subjectIds: string[],
): Promise<Map<string, string>> {
  const rows = await tx.execute<
    { subject_type: string; subject_id: string; address: string; commitment: string }[]
  >(
    `select distinct on (subject_type, subject_id, address) subject_type, subject_id, address, encode(commitment, 'hex') as commitment
       from recorded_value where study_id = ? and subject_id = any(?::uuid[])
      order by subject_type, subject_id, address, sequence desc`,
    [studyId, `{${subjectIds.join(',')}}`],
  );
  return new Map(rows.map((row) => [`${row.subject_type}/${row.subject_id}${row.address}`, row.commitment]));
}
