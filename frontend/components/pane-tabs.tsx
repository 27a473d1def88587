import { useId, type KeyboardEvent, type ReactNode } from 'react';
import { classNames } from './class-names.ts';

export interface Pane {
  key: string;
  label: ReactNode;
  content: ReactNode;
}

interface PaneTabsProps {
  label: string;
  panes: readonly Pane[];
  chosen: string;
  onChoose: (key: string) => void;
}

/** Panes of which one is seen; arrow keys go from tab to tab. */
export function PaneTabs({ label, panes, chosen, onChoose }: PaneTabsProps) {
  const id = useId();
  const present = panes.find(({ key }) => key === chosen) ?? panes[0];

  const handleKey = (event: KeyboardEvent<HTMLDivElement>) => {
    const step = { ArrowRight: 1, ArrowLeft: -1 }[event.key];
    if (step === undefined || present === undefined) return;
    event.preventDefault();
    const next = panes[(panes.indexOf(present) + step + panes.length) % panes.length];
    if (next === undefined) return;
    onChoose(next.key);
    document.getElementById(`${id}-tab-${next.key}`)?.focus();
  };

  return (
    <div>
      <div
        role="tablist"
        tabIndex={-1}
        aria-label={label}
        onKeyDown={handleKey}
        className="flex gap-5 overflow-x-auto border-b px-4"
      >
        {panes.map((pane) => (
          <button
            key={pane.key}
            id={`${id}-tab-${pane.key}`}
            type="button"
            role="tab"
            aria-selected={pane === present}
            aria-controls={`${id}-pane`}
            tabIndex={pane === present ? 0 : -1}
            onClick={() => onChoose(pane.key)}
            className={classNames(
              'min-h-10 border-b-2 text-sm whitespace-nowrap -outline-offset-2!',
              pane === present
                ? 'border-arterial font-semibold text-soot'
                : 'border-transparent text-ink-soft hover:text-ink',
            )}
          >
            {pane.label}
          </button>
        ))}
      </div>
      {present && (
        <div id={`${id}-pane`} role="tabpanel" aria-labelledby={`${id}-tab-${present.key}`}>
          {present.content}
        </div>
      )}
    </div>
  );
}
