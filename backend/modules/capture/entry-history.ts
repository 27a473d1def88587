import type { EntityManager } from '@mikro-orm/postgresql';
import type { HistoryLineDto } from '#schemas/api/capture.ts';
import type { EntryValue } from '#schemas/instruments/entry-values.ts';
import type { Derivation } from '#backend/database/trail/recorded-value.ts';
import { currentActor } from '#backend/http/actor.ts';
import type { LoadedEntry } from './load-entry.ts';
import { presentValue } from './present-value.ts';
import { entryValueSubject } from './store-values.ts';

interface Row {
  sequence: string;
  at: string;
  actor: string | null;
  role: string;
  kind: string;
  id: string;
  address: string;
  value: EntryValue | null;
  written: string | null;
  derivation: Derivation | null;
  redacted_at: string | null;
  reason: string | null;
  check_id: string | null;
  severity: string | null;
  outcome: string | null;
  check_reason: string | null;
  check_level: string | null;
}

/** One line per field per change, oldest first; values a check turned away are among them (AT-01, AT-09). */
export async function entryHistory(
  em: EntityManager,
  { entry, instrument }: LoadedEntry,
): Promise<HistoryLineDto[]> {
  const rows = await em.execute<Row[]>(
    `select event.sequence, to_char(event.at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at,
            person.name as actor, event.role, event.kind, value.id, value.address, value.value, value.written,
            value.derivation, value.redacted_at, reason.value #>> '{}' as reason,
            outcome.check_id, outcome.severity, outcome.outcome, outcome.reason as check_reason,
            outcome.level as check_level
       from recorded_value as value
       join audit_event as event on event.study_id = value.study_id and event.sequence = value.sequence
       left join person on person.id = event.actor_id
       left join recorded_value as reason
              on reason.study_id = value.study_id and reason.subject_id = value.subject_id
             and reason.sequence = value.sequence and reason.address = '/reason'
       left join lateral (select * from check_outcome
                           where check_outcome.study_id = value.study_id and check_outcome.value_id = value.id
                           order by check_outcome.at limit 1) as outcome on true
      where value.study_id = ? and value.subject_id = ? and value.subject_type = ?
      order by event.sequence, value.address`,
    [entry.studyId, entry.id, entryValueSubject],
  );
  const { unblinded } = currentActor();
  return rows.map((row) => ({
    sequence: Number(row.sequence),
    at: row.at,
    actor: row.derivation === null ? (row.actor ?? 'the system') : 'System: derivation',
    role: row.role,
    kind: row.kind,
    address: row.address,
    value:
      row.redacted_at === null
        ? presentValue(instrument.compiled, { ...row, redacted: false })
        : { redacted: true },
    outcome:
      row.check_id === null || (row.check_level === 'unblinding' && !unblinded)
        ? null
        : {
            checkId: row.check_id,
            severity: row.severity ?? '',
            outcome: row.outcome ?? '',
            reason: row.check_reason,
          },
    reason: row.reason,
    derivation:
      row.derivation === null
        ? null
        : { rule: row.derivation.rule, version: row.derivation.version, cause: Number(row.sequence) },
  }));
}
