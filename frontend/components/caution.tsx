import type { ReactNode } from 'react';

/** A caution where the act is: what can hurt, or what a number must not be taken for. */
export function Caution({ title, children }: { title?: string; children: ReactNode }) {
  return (
    <div
      role="note"
      className="rounded-r border-l-3 border-straw bg-straw-wash px-3 py-2 text-sm text-straw-ink"
    >
      <span className="sr-only">Caution: </span>
      {title && <strong className="mb-0.5 block font-semibold">{title}</strong>}
      {children}
    </div>
  );
}

/** Something to know, without danger. */
export function Information({ children }: { children: ReactNode }) {
  return (
    <div role="note" className="rounded-r border-l-3 border-venous bg-venous-wash px-3 py-2 text-sm text-ink">
      {children}
    </div>
  );
}
