import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { Loaded } from '../components/states.tsx';
import { MemberTable } from '../features/accounts/components/member-table.tsx';
import { administeredStudyQuery } from '../features/studies/api/studies.ts';
import { AddSiteDialog } from '../features/studies/components/site-dialogs.tsx';
import { SiteTable } from '../features/studies/components/site-table.tsx';
import { RenameStudyDialog } from '../features/studies/components/study-dialogs.tsx';
import { studyMarks } from '../features/studies/model/study-words.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** A study as the administrator sets it up: its words, its sites, its members; never its data. */
export function AdministrationStudyPage() {
  const { studyId = '' } = useParams();
  const query = useQuery(administeredStudyQuery(studyId));
  const [open, setOpen] = useState<'rename' | 'site'>();
  usePageTitle('Study');
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'Studies', to: '/administration/studies' }, { label: query.data?.name ?? 'Study' }]}
      />
      <Loaded query={query}>
        {(study) => {
          const editable = study.state === 'setting-up' || study.state === 'running';
          return (
            <>
              <PageHead
                title={study.name}
                note={
                  <span className="flex flex-wrap gap-x-4">
                    <span className="font-mono">{study.code}</span>
                    <StateMark {...studyMarks[study.state]} />
                  </span>
                }
                actions={editable && <Button onClick={() => setOpen('rename')}>Change name or title</Button>}
              />
              <p className="mb-4 max-w-prose">{study.title}</p>
              <div className="flex flex-col gap-4">
                <Card
                  title="Sites"
                  flush
                  actions={editable && <Button onClick={() => setOpen('site')}>Add a site</Button>}
                >
                  <SiteTable study={study} editable={editable} />
                </Card>
                <Card
                  title="Members"
                  flush
                  actions={
                    <Link to="/administration/people" className="link">
                      Grant memberships on a person’s page
                    </Link>
                  }
                >
                  <MemberTable study={{ id: study.id }} linked />
                </Card>
              </div>
              {open === 'rename' && <RenameStudyDialog study={study} onClose={() => setOpen(undefined)} />}
              {open === 'site' && <AddSiteDialog study={study} onClose={() => setOpen(undefined)} />}
            </>
          );
        }}
      </Loaded>
    </>
  );
}
