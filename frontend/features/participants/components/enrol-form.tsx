import { useRef, useState, type SubmitEvent } from 'react';
import type { EnrolParticipantBody, ParticipantDto } from '#schemas/api/participants.ts';
import { Button, ButtonLink } from '#frontend/components/button.tsx';
import { ErrorSummary } from '#frontend/components/error-summary.tsx';
import { SelectField } from '#frontend/components/fields.tsx';
import { ApiProblem } from '#frontend/lib/api.ts';
import { useActing } from '#frontend/lib/session/session.ts';
import { enrolParticipant } from '../api/participants.ts';
import { bodyOf, draftProblems, emptyDraft, type IdentifiersDraft } from '../model/identifiers-form.ts';
import { IdentifiersFields } from './identifiers-fields.tsx';

/** Enrolment. What is typed lives in this form alone: not in the address, not on the device. */
export function EnrolForm({ onEnrolled }: { onEnrolled: (participant: ParticipantDto) => void }) {
  const { studyCode, sites } = useActing();
  const [siteId, setSiteId] = useState(sites.length === 1 ? sites[0]!.id : '');
  const [draft, setDraft] = useState(emptyDraft);
  const [tried, setTried] = useState(false);
  const [busy, setBusy] = useState(false);
  const [error, setError] = useState<unknown>();
  const sent = useRef({ text: '', key: '' });

  const missing = draftProblems(draft);
  const problemOf = (field: keyof IdentifiersDraft) =>
    (tried ? missing[field] : undefined) ?? refusalAt(error, `/identifiers/${field}`);

  const handleSubmit = async (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    setTried(true);
    if (busy || siteId === '' || Object.keys(missing).length > 0) return;
    setBusy(true);
    setError(undefined);
    try {
      const body = { siteId, identifiers: bodyOf(draft) };
      onEnrolled(await enrolParticipant(studyCode, body, keyFor(sent.current, body)));
    } catch (problem) {
      setError(problem);
      setBusy(false);
    }
  };

  return (
    <form
      onSubmit={(event) => void handleSubmit(event)}
      noValidate
      autoComplete="off"
      className="flex flex-col gap-5"
    >
      {error !== undefined && <ErrorSummary error={error} />}
      <SelectField
        label="Site"
        required
        className="sm:max-w-80"
        placeholder="Choose the site"
        choices={sites.map(({ id, code, name }) => ({ value: id, label: `${code} · ${name}` }))}
        value={siteId}
        onChange={(event) => setSiteId(event.target.value)}
        error={tried && siteId === '' ? 'Choose the site where the visits will be.' : undefined}
      />
      <IdentifiersFields draft={draft} onChange={setDraft} problemOf={problemOf} />
      <div className="flex flex-wrap gap-3">
        <Button type="submit" variant="primary" large busy={busy}>
          Enrol and make the code
        </Button>
        <ButtonLink to={`/studies/${studyCode}/participants`} large>
          Leave without enrolling
        </ButtonLink>
      </div>
    </form>
  );
}

/** One key for one body: sent again after a lost answer it counts once, changed it is a new request. */
function keyFor(last: { text: string; key: string }, body: EnrolParticipantBody): string {
  const text = JSON.stringify(body);
  if (text !== last.text) Object.assign(last, { text, key: crypto.randomUUID() });
  return last.key;
}

function refusalAt(error: unknown, pointer: string): string | undefined {
  return error instanceof ApiProblem
    ? error.errors.find((problem) => problem.pointer === pointer)?.detail
    : undefined;
}
