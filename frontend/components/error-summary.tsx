import { useEffect, useRef } from 'react';
import { ApiProblem, OfflineError } from '../lib/api.ts';

interface ErrorSummaryProps {
  error: unknown;
  /** The element id of a field by its pointer, so that the summary links to it. */
  fieldId?: (pointer: string) => string | undefined;
}

/** Why something was refused, in words, with a link to each field. Takes the focus when it appears (AX-07). */
export function ErrorSummary({ error, fieldId }: ErrorSummaryProps) {
  const element = useRef<HTMLDivElement>(null);
  useEffect(() => element.current?.focus(), [error]);
  const { title, detail, errors, quote } = inWords(error);
  return (
    <div
      ref={element}
      role="alert"
      tabIndex={-1}
      className="rounded border border-arterial bg-arterial-wash px-3 py-2 text-sm text-ink"
    >
      <strong className="block font-semibold text-arterial">{title}</strong>
      {detail !== title && <p>{detail}</p>}
      {errors.length > 0 && (
        <ul className="mt-1 list-disc pl-5">
          {errors.map((problem) => {
            const target = fieldId?.(problem.pointer);
            return (
              <li key={problem.pointer + problem.detail}>
                {target ? (
                  <a href={`#${target}`} className="link">
                    {problem.detail}
                  </a>
                ) : (
                  problem.detail
                )}
              </li>
            );
          })}
        </ul>
      )}
      {quote && <p className="mt-1 text-ink-soft">Number to quote: {quote}</p>}
    </div>
  );
}

/** Any thrown thing as title, detail and field errors for the person at the screen. */
export function inWords(error: unknown): {
  title: string;
  detail: string;
  errors: ApiProblem['errors'];
  quote?: string;
} {
  if (error instanceof ApiProblem) {
    const unexpected = error.status >= 500;
    return {
      title: unexpected ? 'The server could not do this' : error.title,
      detail: unexpected
        ? 'Nothing was changed. Try again; if it stays, quote the number below.'
        : error.detail,
      errors: error.errors,
      ...(error.requestId && unexpected ? { quote: error.requestId } : {}),
    };
  }
  if (error instanceof OfflineError) {
    return {
      title: 'The server cannot be reached',
      detail: 'Check the network, then try again. What you typed is still here.',
      errors: [],
    };
  }
  return {
    title: 'Something went wrong on this page',
    detail: error instanceof Error ? error.message : String(error),
    errors: [],
  };
}
