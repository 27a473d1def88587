import type { DeviationDto } from '#schemas/api/capture.ts';
import type { RunSheetStep } from '#schemas/protocol/protocol.ts';
import { Card } from '../../../components/card.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';

interface DeviationListProps {
  deviations: readonly DeviationDto[];
  steps: readonly RunSheetStep[];
  zone: string;
}

/** What did not go as the protocol says. */
export function DeviationList({ deviations, steps, zone }: DeviationListProps) {
  if (deviations.length === 0) return null;
  const labels = new Map(steps.map(({ key, label }) => [key, label]));
  return (
    <Card title="Deviations" flush>
      <ul className="divide-y divide-rule-soft">
        {deviations.map(({ id, description, reason, stepKey, origin, notedAt }) => (
          <li key={id} className="px-4 py-2.5">
            <p>{description}</p>
            <p className="text-sm text-ink-soft">
              {[
                formatMoment(notedAt, zone),
                origin === 'run-sheet' ? 'noted by the run sheet' : null,
                stepKey === null ? null : labels.get(stepKey),
                reason,
              ]
                .filter(Boolean)
                .join(' · ')}
            </p>
          </li>
        ))}
      </ul>
    </Card>
  );
}
