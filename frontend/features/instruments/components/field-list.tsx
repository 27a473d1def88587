import { useState } from 'react';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { Button } from '#frontend/components/button.tsx';
import { withFieldMoved } from '../model/edit-fields.ts';
import { fieldRows, type FieldRow } from '../model/field-rows.ts';
import { AddFieldDialog } from './add-field-dialog.tsx';

interface FieldListProps {
  /** The last text without problems, compiled. */
  compiled: CompiledInstrument;
  text: string;
  /** The text can be read, so that fields can be added and moved in it. */
  readable: boolean;
  onChange: (text: string) => void;
  onGoTo: (pointer: string) => void;
}

/** The fields in the order of the form: each leads to its place in the schema, and can be moved. */
export function FieldList({ compiled, text, readable, onChange, onGoTo }: FieldListProps) {
  const [adding, setAdding] = useState(false);
  const rows = fieldRows(compiled);
  return (
    <div className="flex min-h-0 flex-col">
      <ol className="min-h-0 flex-1 overflow-auto">
        {rows.map((row) => (
          <li
            key={row.pointer}
            className="group flex items-start gap-1 border-b border-rule-soft px-3 py-1.5"
          >
            <button
              type="button"
              className="min-w-0 flex-1 text-left text-sm"
              onClick={() => onGoTo(row.schemaPointer)}
            >
              <span className="block font-medium text-venous">{row.label}</span>
              <span className="block text-ink-soft">
                {[row.kind, row.unit, ...row.marks].filter(Boolean).join(' · ')}
              </span>
            </button>
            {atRoot(row) && (
              <span className="flex flex-col">
                <MoveButton row={row} by={-1} word="up" sign="↑" {...{ readable, text, onChange }} />
                <MoveButton row={row} by={1} word="down" sign="↓" {...{ readable, text, onChange }} />
              </span>
            )}
          </li>
        ))}
      </ol>
      <div className="border-t p-3">
        <Button disabled={!readable} onClick={() => setAdding(true)}>
          Add a field
        </Button>
        {!readable && <p className="mt-1 text-sm text-ink-soft">Possible again once the text is JSON.</p>}
      </div>
      {adding && (
        <AddFieldDialog
          text={text}
          onAdded={(next, pointer) => {
            onChange(next);
            onGoTo(pointer);
          }}
          onClose={() => setAdding(false)}
        />
      )}
    </div>
  );
}

/** Groups and conditions are moved in the text. */
const atRoot = ({ schemaPointer }: FieldRow): boolean => /^\/properties\/[^/]+$/.test(schemaPointer);

interface MoveButtonProps {
  row: FieldRow;
  by: -1 | 1;
  word: string;
  sign: string;
  readable: boolean;
  text: string;
  onChange: (text: string) => void;
}

function MoveButton({ row, by, word, sign, readable, text, onChange }: MoveButtonProps) {
  return (
    <button
      type="button"
      aria-label={`Move ${row.label} ${word}`}
      aria-disabled={!readable || undefined}
      className="min-h-6 min-w-6 rounded-sm text-ink-soft hover:bg-bone hover:text-ink"
      onClick={() => readable && onChange(withFieldMoved(text, row.pointer.slice(1), by))}
    >
      <span aria-hidden>{sign}</span>
    </button>
  );
}
