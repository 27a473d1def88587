import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { StudiesTable } from '../features/studies/components/studies-table.tsx';
import { CreateStudyDialog } from '../features/studies/components/study-dialogs.tsx';
import { usePageTitle } from '../lib/use-page-title.ts';

/** Every study, for the administrator. */
export function AdministrationStudiesPage() {
  usePageTitle('Studies');
  const navigate = useNavigate();
  const [making, setMaking] = useState(false);
  return (
    <>
      <PageHead
        title="Studies"
        actions={
          <Button variant="primary" onClick={() => setMaking(true)}>
            Make a study
          </Button>
        }
      />
      <Card flush>
        <StudiesTable />
      </Card>
      {making && (
        <CreateStudyDialog
          onMade={({ id }) => void navigate(`/administration/studies/${id}`)}
          onClose={() => setMaking(false)}
        />
      )}
    </>
  );
}
