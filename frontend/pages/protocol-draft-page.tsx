import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import type { ProtocolDraftDto } from '#schemas/api/protocol.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { PageHead } from '../components/card.tsx';
import { EmptyState, ForbiddenState, Loaded } from '../components/states.tsx';
import { protocolDraftQuery, useProtocolActs } from '../features/protocol/api/protocol.ts';
import { ProtocolEditor } from '../features/protocol/components/protocol-editor.tsx';
import { say } from '../lib/notices.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { useKeptDraft } from '../lib/use-kept-draft.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The draft of the protocol or of its next amendment. */
export function ProtocolDraftPage() {
  const { studyCode } = useActing();
  const may = useMay()('read', 'ProtocolDraft');
  // Asked anew each time the page is opened: what is typed must stand on the stored text, not on a remembered one.
  const query = useQuery({
    ...protocolDraftQuery(studyCode),
    enabled: may,
    gcTime: 0,
    refetchOnWindowFocus: false,
  });
  usePageTitle(`Protocol draft · ${studyCode}`);
  if (!may) return <ForbiddenState />;
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'Protocol', to: `/studies/${studyCode}/protocol` }, { label: 'Draft' }]}
      />
      <Loaded query={query} lines={10}>
        {(draft) =>
          draft === null ? (
            <EmptyState title="No draft of the protocol yet">
              <p>Begin one on the page Protocol.</p>
            </EmptyState>
          ) : (
            <LoadedDraft studyCode={studyCode} draft={draft} />
          )
        }
      </Loaded>
    </>
  );
}

const stored = ({ text, revision }: ProtocolDraftDto) => ({ content: text, revision });

function LoadedDraft({ studyCode, draft }: { studyCode: string; draft: ProtocolDraftDto }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const { save } = useProtocolActs(studyCode);
  const kept = useKeptDraft<string>(stored(draft), {
    send: async (content, revision) => stored(await save(content, revision)),
    load: async () => {
      const present = await client.fetchQuery({ ...protocolDraftQuery(studyCode), staleTime: 0 });
      if (present === null) throw new Error('The draft is gone; load the page again.');
      return stored(present);
    },
  });
  const { baseVersion } = draft;
  return (
    <>
      <PageHead
        title={baseVersion === null ? 'The protocol, being written' : `Amendment of version ${baseVersion}`}
      />
      <ProtocolEditor
        studyCode={studyCode}
        draft={draft}
        kept={kept}
        onPublished={({ version }) => {
          say(`Version ${version} of the protocol is published`);
          void navigate(`/studies/${studyCode}/protocol`);
        }}
      />
    </>
  );
}
