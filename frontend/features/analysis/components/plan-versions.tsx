import { Link } from 'react-router-dom';
import type { PlanVersionDto } from '#schemas/api/analysis.ts';
import { Card } from '../../../components/card.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { shortHash } from '../../../lib/format/numbers.ts';

/** The signed versions of a plan, newest first. */
export function PlanVersions({ study, versions }: { study: string; versions: readonly PlanVersionDto[] }) {
  if (versions.length === 0) return null;
  return (
    <Card title="Signed versions">
      <ul className="flex flex-col gap-1">
        {versions.map(({ id, version, signedBy, signedAt, hash, studyStateThen }) => (
          <li key={id}>
            <Link to={`/studies/${study}/plans/signed/${id}`}>Version {version}</Link>{' '}
            <span className="text-sm text-ink-soft">
              {signedBy}, {formatMoment(signedAt)} · the study was {studyStateThen.replace('-', ' ')} ·{' '}
              <span className="font-mono text-xs">{shortHash(hash)}</span>
            </span>
          </li>
        ))}
      </ul>
    </Card>
  );
}
