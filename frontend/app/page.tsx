import type { ReactNode } from 'react';

/** The page's own part, the target of the skip link. */
export function Page({ children }: { children: ReactNode }) {
  return (
    <main id="main" tabIndex={-1} className="page outline-none">
      {children}
    </main>
  );
}
