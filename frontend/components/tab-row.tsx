import { NavLink } from 'react-router-dom';
import { classNames } from './class-names.ts';

export interface TabLink {
  label: string;
  to: string;
  end?: boolean;
}

/** One row of places. On a narrow screen it scrolls sideways inside itself. */
export function TabRow({ label, tabs }: { label: string; tabs: readonly TabLink[] }) {
  return (
    <nav aria-label={label} data-print="hide" className="overflow-x-auto border-b bg-paper">
      <ul className="mx-auto flex h-11 max-w-page items-stretch gap-6 px-6 max-sm:gap-5 max-sm:px-4">
        {tabs.map(({ label: name, to, end }) => (
          <li key={to} className="flex">
            <NavLink
              to={to}
              end={end ?? false}
              className={({ isActive }) =>
                classNames(
                  'flex items-center border-b-2 pt-0.5 text-[0.875rem] whitespace-nowrap no-underline -outline-offset-2!',
                  isActive
                    ? 'border-arterial font-semibold text-soot'
                    : 'border-transparent text-ink-soft hover:text-ink',
                )
              }
            >
              {name}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
