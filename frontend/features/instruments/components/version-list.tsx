import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { VersionSummaryDto } from '#schemas/api/instruments.ts';
import { Button } from '#frontend/components/button.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { shortHash } from '#frontend/lib/format/numbers.ts';
import { differencesQuery } from '../api/instruments.ts';
import { DifferenceTable } from './difference-table.tsx';

interface VersionListProps {
  studyCode: string;
  versions: readonly VersionSummaryDto[];
  shownId: string;
}

/** Every version with its reason; each tells what it changed about the one before. */
export function VersionList({ studyCode, versions, shownId }: VersionListProps) {
  const [open, setOpen] = useState<string>();
  return (
    <ol className="flex flex-col">
      {versions.map((version, at) => {
        const before = versions[at + 1];
        return (
          <li
            key={version.id}
            className="flex flex-col gap-2 border-b border-rule-soft px-4 py-3 last:border-b-0"
          >
            <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
              <Link to={`?version=${version.version}`} className="font-semibold link">
                Version {version.version}
              </Link>
              <StateMark state={at === 0 ? 'settled' : 'todo'} word={at === 0 ? 'newest' : 'superseded'} />
              {version.id === shownId && <span className="text-sm text-ink-soft">shown here</span>}
              <span className="text-sm text-ink-soft">
                {formatMoment(version.publishedAt)}, {version.authorName} ·{' '}
                <span className="font-mono">{shortHash(version.hash)}</span>
              </span>
              {before && (
                <Button
                  variant="quiet"
                  className="ml-auto"
                  aria-expanded={open === version.id}
                  onClick={() => setOpen(open === version.id ? undefined : version.id)}
                >
                  {open === version.id ? 'Hide the changes' : `Changes since version ${before.version}`}
                </Button>
              )}
            </div>
            <p>{version.reason}</p>
            {before && open === version.id && (
              <Differences studyCode={studyCode} id={version.id} other={before.id} />
            )}
          </li>
        );
      })}
    </ol>
  );
}

function Differences({ studyCode, id, other }: { studyCode: string; id: string; other: string }) {
  return (
    <DifferenceTable
      query={useQuery(differencesQuery(studyCode, id, other))}
      empty="Only samples changed, no field"
    />
  );
}
