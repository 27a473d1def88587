import { useQuery } from '@tanstack/react-query';
import { Loaded } from '../../../components/states.tsx';
import { delimiterOf } from '../model/delimiter.ts';

/** Rows that are drawn; a recording may have many thousands. */
const shownRows = 500;

/** A text table as it lies in the file; every cell as written. */
export function CsvTable({ id, file, label }: { id: string; file: Blob; label: string }) {
  const query = useQuery({
    queryKey: ['source-table', id],
    queryFn: async () => {
      const { parse } = await import('csv-parse/browser/esm/sync');
      const text = await file.text();
      return parse(text, {
        bom: true,
        delimiter: delimiterOf(text),
        relax_column_count: true,
        relax_quotes: true,
        skip_empty_lines: true,
        to: shownRows + 1,
      });
    },
    staleTime: Infinity,
    gcTime: 0,
  });
  return (
    <Loaded query={query} lines={8}>
      {([head = [], ...rows]) => (
        <div
          role="region"
          aria-label={label}
          // A region that scrolls must be reachable by keyboard (WCAG 2.1.1).
          // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
          tabIndex={0}
          className="h-full overflow-auto"
        >
          <table className="text-sm">
            <caption className="sr-only">{label}</caption>
            <thead>
              <tr>
                {head.map((cell, at) => (
                  <th key={at} scope="col" className="sticky top-0 border-b bg-paper px-3 py-1 text-left">
                    {cell}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {rows.slice(0, shownRows).map((row, line) => (
                <tr key={line}>
                  {row.map((cell, at) => (
                    <td key={at} className="border-b border-rule-soft px-3 py-1 whitespace-pre">
                      {cell}
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
          {rows.length >= shownRows && (
            <p className="px-3 py-2 text-sm text-ink-soft">The first {shownRows} rows are shown.</p>
          )}
        </div>
      )}
    </Loaded>
  );
}
