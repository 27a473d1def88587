import { evaluateEntry, instrumentLibrary, type PublishedInstrument } from '../instruments/index.ts';
import type { Finding } from '#schemas/instruments/check-values.ts';
import type { EntryValues } from '#schemas/instruments/entry-values.ts';
import { currentActor } from '#backend/http/actor.ts';
import { Problem } from '#backend/http/problem.ts';
import { messageFor } from './finding-message.ts';
import type { Judged } from './plan-save.ts';

/** The answer when checks turned values away; the attempt is on record. */
export function refusedProblem(refused: readonly Judged[]): Problem {
  const { unblinded } = currentActor();
  return new Problem(
    422,
    'fields-refused',
    'An edit check did not let this pass; correct the value, or confirm it with a reason where the check asks.',
    refused.map(({ change, finding }) => ({
      pointer: change.address,
      detail: messageFor(finding, unblinded),
    })),
    {
      refused: refused.map(({ change, finding }) => ({
        pointer: change.address,
        checkId: finding.checkId,
        severity: finding.severity,
        message: messageFor(finding, unblinded),
      })),
    },
  );
}

/** Findings that keep an entry from being complete: hard ones, and soft ones without an answer. */
export const blocking = (
  { compiled, validator }: PublishedInstrument,
  values: EntryValues,
  answered: ReadonlySet<string>,
): Finding[] =>
  evaluateEntry(compiled, validator, instrumentLibrary, values, 'complete').findings.filter(
    ({ severity, checkId }) => severity === 'hard' || !answered.has(checkId),
  );

/** The answer when an entry cannot be completed yet: every point at its field. */
export function incompleteProblem(findings: readonly Finding[]): Problem {
  const { unblinded } = currentActor();
  return new Problem(
    422,
    'fields-refused',
    'This entry cannot be completed yet; each point is named below.',
    findings.map((finding) => ({
      pointer: finding.pointers[0] ?? '',
      detail: messageFor(finding, unblinded),
    })),
    {
      refused: findings.map((finding) => ({
        pointer: finding.pointers[0] ?? '',
        checkId: finding.checkId,
        severity: finding.severity,
        message: messageFor(finding, unblinded),
      })),
    },
  );
}
