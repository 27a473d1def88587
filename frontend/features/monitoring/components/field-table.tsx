import { useEffect, useRef } from 'react';
import type { VerificationFieldDto } from '#schemas/api/monitoring.ts';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { groupBy } from '../../../lib/group-by.ts';
import { useZone } from '../../../lib/session/session.ts';
import { fieldLook } from '../model/field-words.ts';
import { FieldValue } from './field-value.tsx';

interface FieldTableProps {
  fields: readonly VerificationFieldDto[];
  at: number;
  onChoose: (at: number) => void;
}

/** The fields by step; the current one has the focus, so that it is in sight and read aloud. */
export function FieldTable({ fields, at, onChoose }: FieldTableProps) {
  const current = useRef<HTMLButtonElement>(null);
  const first = useRef(true);
  const zone = useZone();
  useEffect(() => {
    // Not when the page opens: the focus then belongs to the page.
    if (!first.current) current.current?.focus();
    first.current = false;
  }, [at]);
  const steps = groupBy(
    fields.map((field, index) => ({ field, index })),
    ({ field }) => field.step,
  );
  return (
    <div className="overflow-x-auto">
      <table className="w-full">
        <caption className="sr-only">Values of the visit and how they stand to the source</caption>
        <thead>
          <tr>
            {['Field', 'Entered', 'State'].map((head) => (
              <th
                key={head}
                scope="col"
                className={`border-b px-2 py-1.5 text-sm font-medium text-ink-soft ${head === 'Entered' ? 'text-right' : 'text-left'}`}
              >
                {head}
              </th>
            ))}
          </tr>
        </thead>
        {[...steps].map(([step, rows]) => (
          <tbody key={step}>
            <tr>
              <th scope="rowgroup" colSpan={3} className="px-2 pt-3 pb-1 text-left text-sm text-soot">
                {step}
              </th>
            </tr>
            {rows.map(({ field, index }) => (
              <tr
                key={field.entryId + field.address}
                className={index === at ? 'border-l-3 border-venous bg-venous-wash' : undefined}
              >
                <td className="border-b border-rule-soft px-2 py-1.5">
                  <button
                    ref={index === at ? current : undefined}
                    type="button"
                    aria-current={index === at || undefined}
                    onClick={() => onChoose(index)}
                    className={`min-h-6 text-left ${index === at ? 'font-semibold' : ''}`}
                  >
                    {field.label}
                    {!field.required && <span className="text-sm text-ink-soft"> · not required</span>}
                  </button>
                </td>
                <td className="border-b border-rule-soft px-2 py-1.5 numeric">
                  <FieldValue value={field.value} />
                </td>
                <td className="border-b border-rule-soft px-2 py-1.5">
                  <StateMark {...fieldLook(field)} className="whitespace-normal!" />
                  {field.state === 'verified' && field.mark !== null && (
                    <span className="block text-xs text-ink-soft">
                      {field.mark.by}, {formatMoment(field.mark.at, zone)}
                    </span>
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        ))}
      </table>
    </div>
  );
}
