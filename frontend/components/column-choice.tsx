import { useId } from 'react';

interface ColumnChoiceProps {
  columns: readonly { header: string }[];
  shown: readonly string[];
  open: boolean;
  onToggle: () => void;
  onChange: (header: string, on: boolean) => void;
}

/** Which columns a table shows; kept for the person on this device. The last one stays. */
export function ColumnChoice({ columns, shown, open, onToggle, onChange }: ColumnChoiceProps) {
  const id = useId();
  return (
    <div
      data-print="hide"
      className="flex flex-wrap items-center justify-end gap-x-4 gap-y-1 px-3 pt-2 text-sm"
    >
      {open && (
        <fieldset id={id} className="flex flex-wrap gap-x-4 gap-y-1">
          <legend className="sr-only">Columns shown</legend>
          {columns.map(({ header }) => (
            <label key={header} className="flex min-h-6 items-center gap-1.5">
              <input
                type="checkbox"
                className="accent-venous"
                checked={shown.includes(header)}
                disabled={shown.length === 1 && shown.includes(header)}
                onChange={(event) => onChange(header, event.target.checked)}
              />
              {header}
            </label>
          ))}
        </fieldset>
      )}
      <button
        type="button"
        aria-expanded={open}
        aria-controls={id}
        onClick={onToggle}
        className="min-h-6 link"
      >
        Columns
      </button>
    </div>
  );
}
