import { useState } from 'react';
import type { QueryDto } from '#schemas/api/monitoring.ts';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { TextareaField } from '../../../components/fields.tsx';
import { say } from '../../../lib/notices.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useActing } from '../../../lib/session/session.ts';
import { useQueryStep, type QueryStep } from '../api/queries.ts';

const said: Record<QueryStep, string> = {
  replies: 'Reply sent',
  settling: 'Query settled',
  reopening: 'Query opened again',
};

/** Reply, settle, open again: as far as the role may and the state allows. */
export function QueryAnswer({ study, query }: { study: string; query: QueryDto }) {
  const may = useMay();
  const { role, studyState } = useActing();
  const step = useQueryStep(study, query);
  const [text, setText] = useState('');
  const settled = query.state === 'settled';
  // Whoever made the entry answers, and the principal investigator may for all; the server decides.
  const forRole = query.performedBy === role || role === 'principal-investigator';
  const mayReply = !settled && may('reply', 'Query') && forRole;
  const maySettle = may('settle', 'Query');
  if (studyState !== 'running') {
    return <p className="text-sm text-ink-soft">The study is not running, so the thread is closed.</p>;
  }
  if (!mayReply && !maySettle) {
    return (
      <p className="text-sm text-ink-soft">
        {settled
          ? 'The query is settled.'
          : `The ${query.performedBy.replaceAll('-', ' ')} replies, and the one who asked settles it.`}
      </p>
    );
  }
  const handleStep = (taken: QueryStep): void =>
    step.mutate(
      { step: taken, text: text.trim() },
      {
        onSuccess: () => {
          setText('');
          say(said[taken]);
        },
      },
    );
  const off = text.trim().length < 2;
  return (
    <Card title={settled ? 'Open again' : 'Answer'}>
      <div className="flex flex-col gap-3">
        {step.error !== null && <ErrorSummary error={step.error} />}
        <TextareaField
          label={settled ? 'Why it is opened again' : 'Your words'}
          required
          value={text}
          onChange={(event) => setText(event.target.value)}
          help="Write at least a few words; name no participant."
        />
        <div className="flex flex-wrap gap-3">
          {mayReply && (
            <Button
              variant="primary"
              busy={step.isPending}
              disabled={off}
              onClick={() => handleStep('replies')}
            >
              Reply
            </Button>
          )}
          {maySettle && !settled && (
            <Button busy={step.isPending} disabled={off} onClick={() => handleStep('settling')}>
              Settle
            </Button>
          )}
          {maySettle && settled && (
            <Button busy={step.isPending} disabled={off} onClick={() => handleStep('reopening')}>
              Open again
            </Button>
          )}
        </div>
      </div>
    </Card>
  );
}
