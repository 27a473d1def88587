import type { EntityManager } from '@mikro-orm/postgresql';
import {
  ChainVerifier,
  type DumpedEvent,
  type Finding,
  type Head,
} from '#backend/database/trail/verify-chain.ts';

const pageLength = 2000;

/** Follows one study's chain in the database, page by page: the button of the trail's page. */
export async function checkChain(
  em: EntityManager,
  studyId: string,
): Promise<{ ok: boolean; events: number; head: Head | null; findings: Finding[] }> {
  const verifier = new ChainVerifier([]);
  for (let after = 0; ;) {
    const page = await em.execute<DumpedEvent[]>(
      `select study_id as study, sequence::int as sequence,
              to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as at, actor_id as actor,
              membership_id as membership, role, kind, subject, participant_id as participant, site_id as site,
              changes, reason, cause::int as cause, version, encode(previous_hash, 'hex') as previous,
              encode(hash, 'hex') as hash
         from audit_event where study_id = ? and sequence > ? order by sequence limit ?`,
      [studyId, after, pageLength],
    );
    for (const event of page) verifier.event(event);
    if (page.length < pageLength) break;
    after += pageLength;
  }
  const findings = verifier.finish();
  return {
    ok: findings.length === 0,
    events: verifier.events,
    head: verifier.heads.get(studyId) ?? null,
    findings: findings.slice(0, 20),
  };
}
