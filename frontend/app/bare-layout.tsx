import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { BandTrace, Mark } from '../components/mark.tsx';
import { classNames } from '../components/class-names.ts';
import { usePageTitle } from '../lib/use-page-title.ts';

/** A page outside of the signed-in frame: the band with the mark, and what the product must not be taken for. */
export function BareLayout({
  title,
  wide = false,
  children,
}: {
  title: string;
  wide?: boolean;
  children: ReactNode;
}) {
  usePageTitle(title);
  return (
    <div className="flex min-h-dvh flex-col">
      <header data-ground="band" className="relative bg-band text-chalk">
        <BandTrace />
        <div className="relative mx-auto flex min-h-13 max-w-page items-center px-6">
          <Link to="/" className="flex items-center gap-2.5 text-lg font-semibold text-chalk no-underline">
            <Mark />
            Vesselry
          </Link>
        </div>
      </header>
      <main
        id="main"
        tabIndex={-1}
        className={classNames('mx-auto w-full flex-1 px-4 py-10', wide ? 'max-w-4xl' : 'max-w-md')}
      >
        {children}
      </main>
      <footer className="border-t px-6 py-3 text-sm text-ink-soft">
        For research under an approved protocol. Not for diagnosis, treatment or monitoring of patients.
      </footer>
    </div>
  );
}
