import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useNavigate, useParams } from 'react-router-dom';
import type { DraftContentBody, DraftDto } from '#schemas/api/instruments.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { PageHead } from '../components/card.tsx';
import { EmptyState, ForbiddenState, Loaded } from '../components/states.tsx';
import { draftQuery, instrumentsQuery, useDraftActs } from '../features/instruments/api/instruments.ts';
import { DraftingTable } from '../features/instruments/components/drafting-table.tsx';
import { say } from '../lib/notices.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { useKeptDraft } from '../lib/use-kept-draft.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The drafting table with one instrument on it. */
export function DraftingTablePage() {
  const { studyCode } = useActing();
  const { instrumentKey = '' } = useParams();
  const may = useMay()('read', 'InstrumentDraft');
  const query = useQuery({ ...instrumentsQuery(studyCode), enabled: may });
  const base = `/studies/${studyCode}/instruments`;
  usePageTitle(`Drafting table · ${studyCode}`);
  if (!may) return <ForbiddenState />;
  return (
    <Loaded query={query}>
      {(instruments) => {
        const instrument = instruments.find(({ key }) => key === instrumentKey);
        const crumbs = [
          { label: 'Instruments', to: base },
          ...(instrument?.newest ? [{ label: instrument.title, to: `${base}/${instrumentKey}` }] : []),
          { label: 'Drafting table' },
        ];
        return (
          <>
            <Breadcrumbs crumbs={crumbs} />
            {instrument?.draft ? (
              <Draft studyCode={studyCode} draftId={instrument.draft.id} />
            ) : (
              <EmptyState title="No draft of this instrument is on the table">
                <p>Begin one from a version, or from the list of instruments.</p>
              </EmptyState>
            )}
          </>
        );
      }}
    </Loaded>
  );
}

function Draft({ studyCode, draftId }: { studyCode: string; draftId: string }) {
  // Asked anew each time the table is opened: what is typed must stand on the stored text, not on a remembered one.
  const query = useQuery({ ...draftQuery(studyCode, draftId), gcTime: 0, refetchOnWindowFocus: false });
  return (
    <Loaded query={query} lines={10}>
      {(draft) => <LoadedDraft key={draft.id} studyCode={studyCode} draft={draft} />}
    </Loaded>
  );
}

const stored = ({ text, samples, revision }: DraftDto) => ({ content: { text, samples }, revision });

function LoadedDraft({ studyCode, draft }: { studyCode: string; draft: DraftDto }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const { save } = useDraftActs(studyCode);
  const kept = useKeptDraft<DraftContentBody>(stored(draft), {
    send: async (content, revision) => stored(await save(draft.id, content, revision)),
    load: async () => stored(await client.fetchQuery({ ...draftQuery(studyCode, draft.id), staleTime: 0 })),
  });
  return (
    <>
      <PageHead
        title={draft.title}
        note={draft.baseVersion === null ? 'not published yet' : `from version ${draft.baseVersion}`}
      />
      <DraftingTable
        studyCode={studyCode}
        draft={draft}
        kept={kept}
        onPublished={({ key, version }) => {
          say(`Version ${version} is published`);
          void navigate(`/studies/${studyCode}/instruments/${key}?view=versions`);
        }}
      />
    </>
  );
}
