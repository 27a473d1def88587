import type { ProtocolDifferenceDto } from '#schemas/api/protocol.ts';
import { Loaded, type Loadable } from '#frontend/components/states.tsx';

interface ProtocolDifferenceListProps {
  query: Loadable<readonly ProtocolDifferenceDto[]>;
  empty: string;
}

/** What an amendment changes, a sentence a change. */
export function ProtocolDifferenceList({ query, empty }: ProtocolDifferenceListProps) {
  return (
    <Loaded query={query}>
      {(differences) =>
        differences.length === 0 ? (
          <p className="text-ink-soft">{empty}</p>
        ) : (
          <ul className="flex list-disc flex-col gap-1 pl-5">
            {differences.map(({ sentence }) => (
              <li key={sentence} className="break-words">
                {sentence}
              </li>
            ))}
          </ul>
        )
      }
    </Loaded>
  );
}
