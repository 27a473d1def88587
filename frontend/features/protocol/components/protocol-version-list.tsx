import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { ProtocolVersionSummaryDto } from '#schemas/api/protocol.ts';
import { Button } from '#frontend/components/button.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { formatMoment } from '#frontend/lib/format/dates.ts';
import { shortHash } from '#frontend/lib/format/numbers.ts';
import { protocolDifferencesQuery } from '../api/protocol.ts';
import { ProtocolDifferenceList } from './protocol-difference-list.tsx';

interface ProtocolVersionListProps {
  studyCode: string;
  versions: readonly ProtocolVersionSummaryDto[];
  shownId: string;
}

/** Every version with its reason; each tells what it changed about the one before. */
export function ProtocolVersionList({ studyCode, versions, shownId }: ProtocolVersionListProps) {
  const [open, setOpen] = useState<string>();
  return (
    <ol className="flex flex-col">
      {versions.map(({ id, version, publishedAt, authorName, hash, reason }, at) => {
        const before = versions[at + 1];
        return (
          <li key={id} className="flex flex-col gap-2 border-b border-rule-soft px-4 py-3 last:border-b-0">
            <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
              <Link to={`?version=${version}`} className="font-semibold link">
                Version {version}
              </Link>
              <StateMark state={at === 0 ? 'settled' : 'todo'} word={at === 0 ? 'newest' : 'superseded'} />
              {id === shownId && <span className="text-sm text-ink-soft">shown here</span>}
              <span className="text-sm text-ink-soft">
                {formatMoment(publishedAt)}, {authorName} ·{' '}
                <span className="font-mono">{shortHash(hash)}</span>
              </span>
              {before && (
                <Button
                  variant="quiet"
                  className="ml-auto"
                  aria-expanded={open === id}
                  onClick={() => setOpen(open === id ? undefined : id)}
                >
                  {open === id ? 'Hide the changes' : `Changes since version ${before.version}`}
                </Button>
              )}
            </div>
            <p>{reason}</p>
            {before && open === id && <Differences studyCode={studyCode} id={id} other={before.id} />}
          </li>
        );
      })}
    </ol>
  );
}

function Differences({ studyCode, id, other }: { studyCode: string; id: string; other: string }) {
  const query = useQuery(protocolDifferencesQuery(studyCode, id, other));
  return <ProtocolDifferenceList query={query} empty="Nothing that you may know of differs" />;
}
