import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import type { VersionDto, VersionSummaryDto } from '#schemas/api/instruments.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Button, ButtonLink } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { ErrorSummary } from '../components/error-summary.tsx';
import { PaneTabs } from '../components/pane-tabs.tsx';
import { Loaded } from '../components/states.tsx';
import {
  instrumentsQuery,
  useDraftActs,
  versionQuery,
  versionsQuery,
} from '../features/instruments/api/instruments.ts';
import { FieldTable } from '../features/instruments/components/field-table.tsx';
import { PublishedForm } from '../features/instruments/components/published-form.tsx';
import { VersionList } from '../features/instruments/components/version-list.tsx';
import { library } from '../features/instruments/model/library.ts';
import { shortHash } from '../lib/format/numbers.ts';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';
import { useUrlState } from '../lib/use-url-state.ts';

/** A published instrument: its form, its fields, its versions. */
export function InstrumentPage() {
  const { studyCode } = useActing();
  const { instrumentKey = '' } = useParams();
  const [wanted] = useUrlState('version');
  const versions = useQuery(versionsQuery(studyCode, instrumentKey));
  usePageTitle(`${instrumentKey} · ${studyCode}`);
  return (
    <>
      <Breadcrumbs
        crumbs={[
          { label: 'Instruments', to: `/studies/${studyCode}/instruments` },
          { label: versions.data?.[0]?.title ?? instrumentKey },
        ]}
      />
      <Loaded query={versions}>
        {(list) => {
          const chosen = list.find(({ version }) => String(version) === wanted) ?? list[0];
          return chosen && <ChosenVersion studyCode={studyCode} summary={chosen} versions={list} />;
        }}
      </Loaded>
    </>
  );
}

interface ChosenVersionProps {
  studyCode: string;
  summary: VersionSummaryDto;
  versions: readonly VersionSummaryDto[];
}

function ChosenVersion({ studyCode, summary, versions }: ChosenVersionProps) {
  const query = useQuery(versionQuery(studyCode, summary.id));
  const [view, setView] = useUrlState('view', 'form');
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
        actions={
          <>
            <Button onClick={() => print()}>Print the blank form</Button>
            <DraftLink studyCode={studyCode} summary={summary} />
          </>
        }
      />
      <Card flush>
        <Loaded query={query} lines={8}>
          {(version) => (
            <PaneTabs
              label={summary.title}
              chosen={view}
              onChoose={setView}
              panes={[
                {
                  key: 'form',
                  label: 'Form',
                  content: (
                    <div className="max-w-4xl p-4">
                      <PublishedForm studyCode={studyCode} version={version} />
                    </div>
                  ),
                },
                { key: 'fields', label: 'Fields', content: <Fields version={version} /> },
                {
                  key: 'versions',
                  label: `Versions (${versions.length})`,
                  content: <VersionList studyCode={studyCode} versions={versions} shownId={summary.id} />,
                },
              ]}
            />
          )}
        </Loaded>
      </Card>
    </>
  );
}

function Fields({ version }: { version: VersionDto }) {
  const compiled = useMemo(() => compilePublished(version.schema, library), [version.schema]);
  return <FieldTable compiled={compiled} />;
}

/** To the drafting table: on with the draft that lies there, or begin one from this version. */
function DraftLink({ studyCode, summary }: Omit<ChosenVersionProps, 'versions'>) {
  const may = useMay()('create', 'InstrumentDraft');
  const lying = useQuery(instrumentsQuery(studyCode)).data?.find(({ key }) => key === summary.key)?.draft;
  const { begin } = useDraftActs(studyCode);
  const navigate = useNavigate();
  const [error, setError] = useState<unknown>();
  const address = `/studies/${studyCode}/instruments/${summary.key}/draft`;
  if (!may) return null;
  if (lying?.changed) {
    return (
      <ButtonLink to={address} variant="primary">
        Go on with the draft
      </ButtonLink>
    );
  }
  const handleBegin = async () => {
    try {
      await begin({ from: 'version', versionId: summary.id });
      await navigate(address);
    } catch (problem) {
      setError(problem);
    }
  };
  return (
    <>
      <Button variant="primary" onClick={() => void handleBegin()}>
        Change it: draft the next version
      </Button>
      {error !== undefined && <ErrorSummary error={error} />}
    </>
  );
}
