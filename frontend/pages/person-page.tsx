import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import { Breadcrumbs } from '../components/breadcrumbs.tsx';
import { Button } from '../components/button.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { StateMark } from '../components/pen-mark.tsx';
import { Loaded } from '../components/states.tsx';
import { personQuery } from '../features/accounts/api/people.ts';
import { GrantDialog } from '../features/accounts/components/grant-dialog.tsx';
import { HeldMemberships } from '../features/accounts/components/held-memberships.tsx';
import { PersonActs } from '../features/accounts/components/person-acts.tsx';
import { personMarks } from '../features/accounts/model/membership-words.ts';
import { everyStudyQuery } from '../features/studies/api/studies.ts';
import { formatMoment } from '../lib/format/dates.ts';
import { say } from '../lib/notices.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** One account: its state, what its owner is in which study, and what can be done about both. */
export function PersonPage() {
  const { personId = '' } = useParams();
  const person = useQuery(personQuery(personId));
  const studies = useQuery(everyStudyQuery);
  const [granting, setGranting] = useState(false);
  usePageTitle('Person');
  return (
    <>
      <Breadcrumbs
        crumbs={[{ label: 'People', to: '/administration/people' }, { label: person.data?.name ?? 'Person' }]}
      />
      <Loaded query={person}>
        {(data) => (
          <>
            <PageHead
              title={data.name}
              note={
                <span className="flex flex-wrap gap-x-4">
                  {data.email}
                  <StateMark {...personMarks[data.status]} />
                </span>
              }
              actions={<PersonActs person={data} />}
            />
            <Card
              title="Memberships"
              flush
              actions={
                data.status !== 'deactivated' && (
                  <Button variant="primary" onClick={() => setGranting(true)}>
                    Grant a membership
                  </Button>
                )
              }
            >
              <HeldMemberships person={data} studies={studies.data ?? []} />
            </Card>
            <p className="mt-3 text-sm text-ink-soft">
              {data.declarationAcceptedAt
                ? `Accepted on ${formatMoment(data.declarationAcceptedAt)} that a signature here binds.`
                : 'Has not yet accepted that a signature here binds: nothing can be signed.'}
            </p>
            {granting && (
              <GrantDialog
                person={data}
                studies={studies.data ?? []}
                onGranted={() => say('The membership was granted')}
                onClose={() => setGranting(false)}
              />
            )}
          </>
        )}
      </Loaded>
    </>
  );
}
