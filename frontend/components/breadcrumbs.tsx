import { Link } from 'react-router-dom';

export interface Crumb {
  label: string;
  to?: string;
}

/** Where this page stands, in words; the last one is the page itself. */
export function Breadcrumbs({ crumbs }: { crumbs: readonly Crumb[] }) {
  return (
    <nav aria-label="Breadcrumbs" data-print="hide" className="mb-2 text-sm">
      <ol className="flex flex-wrap items-center gap-x-2">
        {crumbs.map(({ label, to }, at) => (
          <li key={label} className="flex items-center gap-x-2">
            {at > 0 && (
              <span aria-hidden className="text-ink-soft">
                ›
              </span>
            )}
            {to && at < crumbs.length - 1 ? (
              <Link to={to} className="link">
                {label}
              </Link>
            ) : (
              <span aria-current={at === crumbs.length - 1 ? 'page' : undefined} className="text-ink-soft">
                {label}
              </span>
            )}
          </li>
        ))}
      </ol>
    </nav>
  );
}
