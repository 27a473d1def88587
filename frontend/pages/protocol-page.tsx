import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { ProtocolVersionSummaryDto } from '#schemas/api/protocol.ts';
import { Button, ButtonLink } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { PaneTabs } from '../components/pane-tabs.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { EmptyState, Loaded } from '../components/states.tsx';
import {
  protocolDraftQuery,
  protocolVersionQuery,
  protocolVersionsQuery,
  useProtocolActs,
} from '../features/protocol/api/protocol.ts';
import { protocolPanes } from '../features/protocol/components/protocol-panes.tsx';
import { ProtocolVersionList } from '../features/protocol/components/protocol-version-list.tsx';
import { shortHash } from '../lib/format/numbers.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

/** The protocol as it reads, version by version; for the investigator the way to its draft. */
export function ProtocolPage() {
  const { studyCode } = useActing();
  const [wanted] = useUrlState('version');
  const versions = useQuery(protocolVersionsQuery(studyCode));
  usePageTitle(`Protocol · ${studyCode}`);
  return (
    <Loaded query={versions}>
      {(list) => {
        const chosen = list.find(({ version }) => String(version) === wanted) ?? list[0];
        return chosen ? (
          <ChosenVersion studyCode={studyCode} summary={chosen} versions={list} />
        ) : (
          <>
            <PageHead title="Protocol" actions={<DraftLink studyCode={studyCode} published={false} />} />
            <Card flush>
              <EmptyState title="No protocol is published yet">
                <p>The principal investigator writes and publishes it; then it reads here.</p>
              </EmptyState>
            </Card>
          </>
        );
      }}
    </Loaded>
  );
}

interface ChosenVersionProps {
  studyCode: string;
  summary: ProtocolVersionSummaryDto;
  versions: readonly ProtocolVersionSummaryDto[];
}

function ChosenVersion({ studyCode, summary, versions }: ChosenVersionProps) {
  const query = useQuery(protocolVersionQuery(studyCode, summary.id));
  const [view, setView] = useUrlState('view', 'overview');
  const newest = versions[0]?.id === summary.id;
  return (
    <>
      <PageHead
        title={summary.title}
        note={
          <>
            Version {summary.version}
            {newest ? ', the newest' : ', superseded'} ·{' '}
            <span className="font-mono">{shortHash(summary.hash)}</span>
          </>
        }
        actions={<DraftLink studyCode={studyCode} published />}
      />
      <Card flush>
        <Loaded query={query} lines={8}>
          {({ content, instruments }) => (
            <PaneTabs
              label={summary.title}
              chosen={view}
              onChoose={setView}
              panes={[
                ...protocolPanes({ studyCode, content, instruments }),
                {
                  key: 'versions',
                  label: `Versions (${versions.length})`,
                  content: (
                    <ProtocolVersionList studyCode={studyCode} versions={versions} shownId={summary.id} />
                  ),
                },
              ]}
            />
          )}
        </Loaded>
      </Card>
    </>
  );
}

/** To the draft: go on with it where one is under way, or begin one. */
function DraftLink({ studyCode, published }: { studyCode: string; published: boolean }) {
  const may = useMay()('read', 'ProtocolDraft');
  const draft = useQuery({ ...protocolDraftQuery(studyCode), enabled: may });
  const { begin } = useProtocolActs(studyCode);
  const navigate = useNavigate();
  const [error, setError] = useState<unknown>();
  const address = `/studies/${studyCode}/protocol/draft`;
  if (!may || draft.data === undefined) return null;
  if (draft.data?.changed) {
    return (
      <>
        <StateMark state="underway" word={published ? 'an amendment is being drafted' : 'being drafted'} />
        <ButtonLink to={address} variant="primary">
          Go on with the draft
        </ButtonLink>
      </>
    );
  }
  const handleBegin = async () => {
    try {
      await begin(published ? 'newest' : 'blank');
      await navigate(address);
    } catch (problem) {
      setError(problem);
    }
  };
  return (
    <>
      <Button variant="primary" onClick={() => void handleBegin()}>
        {published ? 'Draft an amendment' : 'Write the protocol'}
      </Button>
      {error !== undefined && <ErrorSummary error={error} />}
    </>
  );
}
