import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { VisitDto } from '#schemas/api/capture.ts';
import type { VerificationDto } from '#schemas/api/monitoring.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { Progress } from '../../../components/progress.tsx';
import { EmptyState, Loaded } from '../../../components/states.tsx';
import { useShortcut } from '../../../lib/keyboard/use-shortcut.ts';
import { say } from '../../../lib/notices.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useClearMark, useVerify, verificationQuery } from '../api/verification.ts';
import { nextWaiting } from '../model/field-words.ts';
import { AskQueryDialog } from './ask-query-dialog.tsx';
import { FieldTable } from './field-table.tsx';

interface VerificationDeskProps {
  study: string;
  visit: VisitDto;
  /** The document that is compared with; null while there is none that stands. */
  sourceId: string | null;
}

/** The values of a visit in run-sheet order, one of them current: verify, ask, next. */
export function VerificationDesk(props: VerificationDeskProps) {
  const query = useQuery(verificationQuery(props.study, props.visit.id));
  return (
    <Card title="Values" note="in the order of the run sheet">
      <Loaded query={query} lines={12}>
        {(verification) =>
          verification.fields.length === 0 ? (
            <EmptyState title="This visit holds no value to compare">
              <p>Values appear when the entries of the visit hold some that your role may know.</p>
            </EmptyState>
          ) : (
            <Desk {...props} verification={verification} />
          )
        }
      </Loaded>
    </Card>
  );
}

const group = 'Verification desk';

function Desk({
  study,
  visit,
  sourceId,
  verification,
}: VerificationDeskProps & { verification: VerificationDto }) {
  const { fields, done, needed } = verification;
  const may = useMay();
  const verify = useVerify(study, visit.id);
  const clear = useClearMark(study, visit.id);
  const [at, setAt] = useState(() => Math.max(0, nextWaiting(fields, -1)));
  const [dialog, setDialog] = useState<'ask' | 'clear' | null>(null);
  const field = fields[at] ?? fields[0]!;
  const mayVerify = may('verify', 'Entry');
  const mayAsk = may('ask', 'Query');
  const verified = field.state === 'verified';

  const handleNext = (): void => {
    const next = nextWaiting(fields, at);
    if (next === -1) say('No other field waits to be verified');
    else setAt(next);
  };
  const handleVerify = (): void => {
    if (!mayVerify || sourceId === null || verified || verify.isPending) return;
    const { entryId, revision, address, label } = field;
    verify.mutate(
      { sourceDocumentId: sourceId, fields: [{ entryId, revision, address }] },
      {
        onSuccess: () => {
          say(`Verified: ${label}`);
          const next = nextWaiting(fields, at);
          if (next !== -1) setAt(next);
        },
      },
    );
  };
  useShortcut({ id: 'verify', keys: 'v', label: 'Verify the current value', group }, handleVerify, {
    active: mayVerify,
  });
  useShortcut({ id: 'ask', keys: 'q', label: 'Ask about the current value', group }, () => setDialog('ask'), {
    active: mayAsk,
  });
  useShortcut({ id: 'next-field', keys: 'n', label: 'Next field that waits', group }, handleNext);

  return (
    <div className="flex flex-col gap-3">
      <Progress label="Fields verified" done={done} total={needed} noun="fields verified" />
      {verify.error !== null && <ErrorSummary error={verify.error} />}
      <FieldTable fields={fields} at={at} onChoose={setAt} />
      <div
        role="group"
        aria-label={`Acts for ${field.label}`}
        className="sticky bottom-0 flex flex-wrap items-center gap-3 border-t bg-paper py-3"
      >
        <strong className="text-sm text-soot">{field.label}</strong>
        {mayVerify && (
          <Button
            variant="primary"
            keyHint="v"
            busy={verify.isPending}
            disabled={sourceId === null || verified}
            onClick={handleVerify}
          >
            Verify
          </Button>
        )}
        {mayAsk && (
          <Button keyHint="q" onClick={() => setDialog('ask')}>
            Ask
          </Button>
        )}
        <Button keyHint="n" onClick={handleNext}>
          Next
        </Button>
        {mayVerify && verified && (
          <Button variant="danger" onClick={() => setDialog('clear')}>
            Clear the mark
          </Button>
        )}
        {mayVerify && sourceId === null && (
          <span className="text-sm text-ink-soft">Choose a source document that stands, to verify.</span>
        )}
      </div>
      {dialog === 'ask' && (
        <AskQueryDialog study={study} visit={visit} field={field} onClose={() => setDialog(null)} />
      )}
      {dialog === 'clear' && field.mark !== null && (
        <ActDialog
          title={`Clear the mark of ${field.label}`}
          act="Clear the mark"
          consequences={<p>The mark stays in the record as cleared; the value waits to be verified again.</p>}
          onAct={({ reason }) => clear.mutateAsync({ id: field.mark?.id ?? '', reason })}
          onClose={() => setDialog(null)}
        />
      )}
    </div>
  );
}
