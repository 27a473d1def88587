import { useState, type ClipboardEvent, type KeyboardEvent } from 'react';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { readingsOf } from '#schemas/instruments/readings.ts';
import { Button } from '../../components/button.tsx';
import { shortcutsEnabled } from '../../lib/keyboard/key-map.ts';
import { useFieldVersions, useForm } from '../form-context.ts';
import { GridKeysHint } from './grid-keys-hint.tsx';
import { placeAfterKey, type Place } from './grid-keys.ts';
import { GridTable } from './grid-table.tsx';
import { readingsRunAcross } from './group-readings.ts';
import { isRange, layPasted } from './pasted.ts';
import { ReadingProblems } from './reading-problems.tsx';
import { rejectionOf } from './reading-cell.tsx';
import { SetAsideDialog } from './set-aside-dialog.tsx';

/** Repeated readings of one field, or of several taken side by side, as a grid for the keyboard. */
export function ReadingsGrid({
  fields,
  required,
}: {
  fields: readonly CompiledField[];
  required: readonly string[];
}) {
  const { store, idPrefix, readOnly } = useForm();
  const [more, setMore] = useState(0);
  const [left, setLeft] = useState<string[]>([]);
  const [aside, setAside] = useState<Place>();
  const [last, setLast] = useState<Place>();
  useFieldVersions(fields.map(({ pointer }) => pointer));

  const most = Math.max(...fields.map(({ readings }) => readings?.most ?? 0));
  const readings = Math.min(most, boxes(fields, store.entryValues(), store.compiled) + more);
  const shape = { fields: fields.length, readings, readingsAcross: readingsRunAcross(fields) };
  const addressOf = ({ field, reading }: Place) => `${fields[field]!.pointer}/${reading}`;
  const focus = (place: Place) => {
    const cell = document.getElementById(idPrefix + addressOf(place));
    cell?.focus();
    if (cell instanceof HTMLInputElement) cell.select();
  };

  const handleKeyDown = (event: KeyboardEvent) => {
    const place = placeOf(event.target);
    if (!place || event.ctrlKey || event.metaKey || event.altKey) return;
    if (event.key === 'x' && shortcutsEnabled() && !readOnly) {
      event.preventDefault();
      turnAside(place);
      return;
    }
    const next = placeAfterKey(event.key, place, shape, caretOf(event.target));
    if (event.key === 'Enter') event.preventDefault();
    if (!next) return;
    event.preventDefault();
    focus(next);
  };

  const handlePaste = (event: ClipboardEvent) => {
    const text = event.clipboardData.getData('text/plain');
    const place = placeOf(event.target);
    if (!place || readOnly || !isRange(text)) return;
    event.preventDefault();
    const { cells, left: unplaced } = layPasted(text, place, { ...shape, readings: most });
    setMore((present) =>
      Math.max(present, Math.max(...cells.map(({ reading }) => reading + 1)) - readings + present),
    );
    for (const cell of cells) {
      if (rejectionOf(store.get, fields[cell.field]!, cell.reading) !== undefined) continue;
      store.type(addressOf(cell), cell.text);
      store.commit(addressOf(cell));
    }
    setLeft(unplaced);
  };

  /** Sets a reading aside with a reason, or takes it back where it was. */
  const turnAside = (place: Place) => {
    const field = fields[place.field]!;
    store.commit(addressOf(place));
    if (rejectionOf(store.get, field, place.reading) === undefined) {
      setAside(place);
      return;
    }
    for (const pointer of field.readings?.partners ?? []) {
      const address = `${pointer}/${place.reading}`;
      if (store.get(address).rejected !== undefined) store.change({ pointer: address, rejected: null });
    }
  };

  const allHidden = fields.every(({ pointer }) => store.get(pointer).hidden);
  const asideField = aside && fields[aside.field];
  return (
    <div className="flex min-w-0 flex-col gap-2 sm:col-span-full">
      <GridTable
        fields={fields}
        required={required}
        shape={shape}
        onKeyDown={handleKeyDown}
        onPaste={handlePaste}
        onFocus={(event) => setLast(placeOf(event.target) ?? last)}
      />
      <ReadingProblems fields={fields} readings={readings} left={left} onSeen={() => setLeft([])} />
      {!readOnly && !allHidden && (
        <div data-print="hide" className="flex flex-wrap items-center gap-x-3 gap-y-2">
          {last && (
            <Button {...(shortcutsEnabled() ? { keyHint: 'x' } : {})} onClick={() => turnAside(last)}>
              {rejectionOf(store.get, fields[last.field]!, last.reading) === undefined
                ? 'Set aside'
                : 'Count again'}
              {': '}
              {fields.length > 1 && `${fields[last.field]!.label}, `}reading {last.reading + 1}
            </Button>
          )}
          {readings < most && <Button onClick={() => setMore(more + 1)}>One more reading</Button>}
          <GridKeysHint />
        </div>
      )}
      {aside && asideField && (
        <SetAsideDialog
          reading={`${asideField.label}, reading ${aside.reading + 1}`}
          reasons={asideField.readings?.rejectionReasons ?? []}
          onChoose={(reason) => {
            store.change({ pointer: addressOf(aside), rejected: reason });
            setAside(undefined);
          }}
          onClose={() => setAside(undefined)}
        />
      )}
    </div>
  );
}

/** As many boxes as the rules ask for, and as many as are filled in. */
function boxes(
  fields: readonly CompiledField[],
  values: Parameters<typeof readingsOf>[2],
  compiled: Parameters<typeof readingsOf>[0],
): number {
  const expected = fields.map((field) => readingsOf(compiled, field, values).expected);
  const filled = fields.flatMap(({ pointer, readings }) =>
    Array.from({ length: readings?.most ?? 0 }, (_, at) =>
      values[`${pointer}/${at}`] === undefined ? 0 : at + 1,
    ),
  );
  return Math.max(1, ...expected, ...filled);
}

function placeOf(target: EventTarget): Place | undefined {
  const cell = target instanceof Element ? target.closest<HTMLElement>('td[data-reading]') : null;
  return cell
    ? { field: Number(cell.dataset['field']), reading: Number(cell.dataset['reading']) }
    : undefined;
}

function caretOf(target: EventTarget) {
  if (!(target instanceof HTMLInputElement)) return { atStart: true, atEnd: true };
  const { selectionStart, selectionEnd, value } = target;
  const whole = selectionStart === 0 && selectionEnd === value.length;
  return {
    atStart: whole || (selectionStart === 0 && selectionEnd === 0),
    atEnd: whole || (selectionStart === value.length && selectionEnd === value.length),
  };
}
