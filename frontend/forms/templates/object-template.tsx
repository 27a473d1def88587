import type { ObjectFieldTemplateProps } from '@rjsf/utils';
import type { ReactNode } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { useAddress, useForm } from '../form-context.ts';
import { groupReadings } from '../readings/group-readings.ts';
import { ReadingsGrid } from '../readings/readings-grid.tsx';

/** An entry, or a group of fields in it; readings that belong together share a grid. */
export function ObjectTemplate({
  fieldPathId,
  properties,
  title,
  description,
  schema,
}: ObjectFieldTemplateProps) {
  const address = useAddress(fieldPathId.$id);
  const { store } = useForm();
  const required = new Set((schema.required ?? []).map((name) => `${address}/${name}`));
  const parts: ReactNode[] = [];
  let run: CompiledField[] = [];
  const endRun = () => {
    for (const fields of groupReadings(run)) {
      parts.push(<ReadingsGrid key={fields[0]!.pointer} fields={fields} required={[...required]} />);
    }
    run = [];
  };
  for (const { name, content } of properties) {
    const field = store.compiled.field(`${address}/${name}`);
    if (field?.readings) {
      run.push(field);
      continue;
    }
    endRun();
    parts.push(content);
  }
  endRun();

  const body = <div className="grid grid-cols-1 gap-x-5 gap-y-4 sm:grid-cols-2">{parts}</div>;
  if (address === '') return body;
  return (
    <fieldset className="flex min-w-0 flex-col gap-2 border-t pt-3 sm:col-span-full">
      <legend className="pr-3 font-semibold text-soot">{title}</legend>
      {description && <p className="text-sm text-ink-soft">{description}</p>}
      {body}
    </fieldset>
  );
}
