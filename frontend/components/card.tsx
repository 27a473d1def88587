import type { ReactNode } from 'react';
import { classNames } from './class-names.ts';

interface CardProps {
  title?: ReactNode;
  /** Small words beside the title. */
  note?: ReactNode;
  /** Links or buttons at the right of the title. */
  actions?: ReactNode;
  /** Without padding, for tables and lists that reach the edge. */
  flush?: boolean;
  className?: string;
  children: ReactNode;
}

/** A sheet of paper on the page. */
export function Card({ title, note, actions, flush = false, className, children }: CardProps) {
  return (
    <section className={classNames('rounded border bg-paper', className)}>
      {(title || actions) && (
        <header className="flex flex-wrap items-baseline gap-x-3 gap-y-1 px-4 pt-3.5 pb-1">
          {title && <h2 className="text-base">{title}</h2>}
          {note && <span className="text-sm text-ink-soft">{note}</span>}
          {actions && <span className="ml-auto flex items-baseline gap-4 text-sm">{actions}</span>}
        </header>
      )}
      <div className={flush ? undefined : 'px-4 pt-2 pb-4'}>{children}</div>
    </section>
  );
}

/** Head of a page: what it is, a note, and its acts at the right. */
export function PageHead({
  title,
  note,
  actions,
}: {
  title: ReactNode;
  note?: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <header className="mb-4 flex flex-wrap items-center gap-x-3.5 gap-y-2">
      <h1>{title}</h1>
      {note && <span className="text-sm text-ink-soft">{note}</span>}
      {actions && <span className="ml-auto flex flex-wrap items-center gap-3">{actions}</span>}
    </header>
  );
}
