import { useEffect, useState, type ReactNode } from 'react';
import { ApiProblem, OfflineError } from '../lib/api.ts';
import { Button } from './button.tsx';
import { inWords } from './error-summary.tsx';

/** Bars in place of content; they appear only above 200 ms, so quick answers do not flicker. */
export function Skeleton({ lines = 3, label = 'Loading' }: { lines?: number; label?: string }) {
  const [shown, setShown] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setShown(true), 200);
    return () => clearTimeout(timer);
  }, []);
  return (
    <div role="status" aria-busy className="flex flex-col gap-3 p-4">
      <span className="sr-only">{label}</span>
      {shown &&
        Array.from({ length: lines }, (_, line) => (
          <span
            key={line}
            className="h-4 animate-[breathe_1.2s_ease-in-out_infinite] rounded-sm bg-rule-soft"
            style={{ width: `${[92, 74, 83, 61][line % 4]}%` }}
          />
        ))}
    </div>
  );
}

/** Nothing here yet: says so, and what to do first. */
export function EmptyState({ title, children }: { title: string; children?: ReactNode }) {
  return <State title={title}>{children}</State>;
}

/** It failed: what happened, what to do, again. */
export function ErrorState({ error, onRetry }: { error: unknown; onRetry?: () => void }) {
  const { title, detail, quote } = inWords(error);
  return (
    <State title={title} alert>
      <p>{detail}</p>
      {quote && <p>Number to quote: {quote}</p>}
      {onRetry && (
        <Button onClick={onRetry} className="mt-2">
          Try again
        </Button>
      )}
    </State>
  );
}

/** Not for this role: says who can help, never what is behind. */
export function ForbiddenState({ children }: { children?: ReactNode }) {
  return (
    <State title="Your role does not open this">
      {children ?? (
        <p>
          What you may see follows from the role you act in. If you hold another role in this study, choose it
          from the band; otherwise ask the administrator.
        </p>
      )}
    </State>
  );
}

/** What `useQuery` returns, as far as a state is told from it. */
export interface Loadable<Data> {
  data: Data | undefined;
  error: Error | null;
  refetch: () => unknown;
}

interface LoadedProps<Data> {
  query: Loadable<Data>;
  /** Bars while waiting. */
  lines?: number;
  children: (data: Data) => ReactNode;
}

/** Draws the data of a query, or its loading, forbidden, missing, offline or error state. */
export function Loaded<Data>({ query, lines = 4, children }: LoadedProps<Data>) {
  const { data, error, refetch } = query;
  if (data !== undefined) {
    return (
      <>
        {error instanceof OfflineError && (
          <p className="pb-2 text-sm text-ink-soft">Shown as last received; the server cannot be reached.</p>
        )}
        {children(data)}
      </>
    );
  }
  if (!error) return <Skeleton lines={lines} />;
  return <FailedState error={error} onRetry={() => void refetch()} />;
}

/** The right state for a failure: forbidden, not there, or an error with a way on. */
export function FailedState({ error, onRetry }: { error: unknown; onRetry?: () => void }) {
  if (error instanceof ApiProblem && error.status === 403) return <ForbiddenState />;
  if (error instanceof ApiProblem && error.status === 404) {
    return (
      <State title="There is nothing here">
        <p>{error.detail}</p>
      </State>
    );
  }
  return <ErrorState error={error} {...(onRetry ? { onRetry } : {})} />;
}

function State({ title, alert = false, children }: { title: string; alert?: boolean; children?: ReactNode }) {
  return (
    <div
      role={alert ? 'alert' : undefined}
      className="flex flex-col items-start gap-1 px-4 py-6 text-ink-soft"
    >
      <p className="font-semibold text-soot">{title}</p>
      {children}
    </div>
  );
}
