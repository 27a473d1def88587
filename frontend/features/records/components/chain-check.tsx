import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatCount } from '../../../lib/format/numbers.ts';
import { useCheckChain } from '../api/trail.ts';

/** Follows the chain from its first event to its head, and says what it found. */
export function ChainCheck({ study }: { study: string | null }) {
  const check = useCheckChain(study);
  const { data } = check;
  return (
    <Card
      className="mb-4"
      title="The chain"
      note="each event carries the hash of the one before"
      actions={
        <Button busy={check.isPending} onClick={() => check.mutate()}>
          Check the chain
        </Button>
      }
    >
      <div aria-live="polite" className="flex flex-col gap-2">
        {check.error !== null && <ErrorSummary error={check.error} />}
        {data === undefined && check.error === null && (
          <p className="text-sm text-ink-soft">Not checked since this page was opened.</p>
        )}
        {data !== undefined && (
          <StateMark
            state={data.ok ? 'settled' : 'asks'}
            word={
              data.ok
                ? `whole: ${formatCount(data.events)} events follow from each other`
                : `broken: tell the administrator and change nothing (${formatCount(data.events)} events read)`
            }
            className="whitespace-normal!"
          />
        )}
        {data?.head != null && (
          <p className="text-sm text-ink-soft">
            Head: no. {data.head.sequence},{' '}
            <span className="font-mono text-xs break-all">{data.head.hash}</span>
          </p>
        )}
        {data !== undefined && data.findings.length > 0 && (
          <ul className="list-disc pl-6 text-sm">
            {data.findings.map(({ sequence, message }) => (
              <li key={`${sequence ?? ''}${message}`}>
                {sequence === null ? '' : `no. ${sequence}: `}
                {message}
              </li>
            ))}
          </ul>
        )}
      </div>
    </Card>
  );
}
