import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { instrumentsQuery } from '../features/instruments/api/instruments.ts';
import { BeginDraftDialog } from '../features/instruments/components/begin-draft-dialog.tsx';
import { InstrumentTable } from '../features/instruments/components/instrument-table.tsx';
import { useMay } from '../lib/session/ability.ts';
import { useActing } from '../lib/session/session.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** The instruments of the study. */
export function InstrumentsPage() {
  const { studyCode, studyName } = useActing();
  const navigate = useNavigate();
  const drafts = useMay()('create', 'InstrumentDraft');
  const present = useQuery(instrumentsQuery(studyCode)).data ?? [];
  const [beginning, setBeginning] = useState(false);
  usePageTitle(`Instruments · ${studyCode}`);
  return (
    <>
      <PageHead
        title="Instruments"
        note={studyName}
        actions={
          drafts && (
            <Button variant="primary" onClick={() => setBeginning(true)}>
              New instrument
            </Button>
          )
        }
      />
      <Card flush>
        <InstrumentTable studyCode={studyCode} drafts={drafts} />
      </Card>
      {beginning && (
        <BeginDraftDialog
          studyCode={studyCode}
          present={present}
          onBegun={({ key }) => void navigate(`/studies/${studyCode}/instruments/${key}/draft`)}
          onClose={() => setBeginning(false)}
        />
      )}
    </>
  );
}
