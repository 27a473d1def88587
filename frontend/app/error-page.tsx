import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import { ApiProblem } from '../lib/api.ts';
import { Card } from '../components/card.tsx';
import { EmptyState, FailedState } from '../components/states.tsx';
import { Page } from './page.tsx';
import { usePageTitle } from '../lib/use-page-title.ts';

/** An address that leads nowhere. */
export function NotFoundPage() {
  usePageTitle('Not found');
  return (
    <Card flush>
      <EmptyState title="This address leads nowhere">
        <p>
          The link may be old or cut short.{' '}
          <a className="link" href="/">
            Go to where your role begins
          </a>
          .
        </p>
      </EmptyState>
    </Card>
  );
}

/** A page that failed: says so in its place, with a way on. */
export function ErrorPage() {
  const error = useRouteError();
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFoundPage />;
  // After a new release the old page asks for parts that are gone; loading the document anew brings the new ones.
  const reload = () => location.reload();
  return (
    <Card flush>
      <FailedState
        error={error}
        {...(error instanceof ApiProblem && error.status < 500 ? {} : { onRetry: reload })}
      />
    </Card>
  );
}

/** When the frame itself failed. */
export function LastErrorPage() {
  return (
    <Page>
      <ErrorPage />
    </Page>
  );
}
