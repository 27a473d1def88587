import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import { rejectionReasonLabel } from '#schemas/vocabulary/rejection-reasons.ts';
import { Button } from '../../components/button.tsx';
import { FindingList } from '../finding-list.tsx';
import { useForm } from '../form-context.ts';
import { FieldError } from '../../components/field.tsx';
import type { FieldState } from '../form-store.ts';

interface ReadingProblemsProps {
  fields: readonly CompiledField[];
  readings: number;
  /** Pasted values that found no place. */
  left: readonly string[];
  onSeen: () => void;
}

interface Named {
  address: string;
  name: string;
  state: FieldState;
}

/** Below the grid: what is no number yet, what the checks say, which readings were set aside and why. */
export function ReadingProblems({ fields, readings, left, onSeen }: ReadingProblemsProps) {
  const { store } = useForm();
  const cells: Named[] = fields.flatMap((field) =>
    Array.from({ length: readings }, (_, reading) => ({
      address: `${field.pointer}/${reading}`,
      name: `${field.label}, reading ${reading + 1}`,
      state: store.get(`${field.pointer}/${reading}`),
    })),
  );
  const commas = cells.filter(({ state }) => state.problem?.suggestion !== undefined);
  const others = cells.filter(({ state }) => state.problem && state.problem.suggestion === undefined);
  const aside = cells.filter(({ state }) => state.rejected !== undefined);
  return (
    <div className="flex flex-col gap-1.5 empty:hidden" aria-live="polite">
      {commas.length > 0 && <CommaQuestion cells={commas} />}
      {others.map(({ address, name, state }) => (
        <FieldError key={address}>
          {name}: {state.problem?.message}
        </FieldError>
      ))}
      {left.length > 0 && (
        <p className="flex flex-wrap items-center gap-2 text-sm text-ink">
          {left.length} pasted {left.length === 1 ? 'value' : 'values'} found no place and{' '}
          {left.length === 1 ? 'was' : 'were'} not used: {left.join(', ')}
          <Button variant="quiet" onClick={onSeen}>
            Seen
          </Button>
        </p>
      )}
      {aside.length > 0 && (
        <p className="text-sm text-ink-soft">
          Set aside:{' '}
          {aside
            .map(({ name, state }) => `${name} (${rejectionReasonLabel(state.rejected ?? '')})`)
            .join('; ')}
        </p>
      )}
      {fields.map(({ pointer }) => (
        <FindingList key={pointer} address={pointer} />
      ))}
      {cells.map(({ address }) => (
        <FindingList key={address} address={address} />
      ))}
    </div>
  );
}

/** One question for all readings with a decimal comma: pasted columns bring many. */
function CommaQuestion({ cells }: { cells: readonly Named[] }) {
  const { store } = useForm();
  const read = () => {
    for (const { address, state } of cells) {
      const suggestion = state.problem?.suggestion;
      if (suggestion !== undefined)
        store.change({ pointer: address, value: Number(suggestion), written: suggestion });
    }
  };
  const empty = () => {
    for (const { address } of cells) store.dropDraft(address);
  };
  const written = cells.map(({ state }) => state.draft).join('; ');
  const meant = cells.map(({ state }) => state.problem?.suggestion).join('; ');
  return (
    <div className="flex flex-wrap items-center gap-2 rounded-r border-l-3 border-straw bg-straw-wash px-3 py-1.5 text-sm text-straw-ink">
      <span>
        {cells.length === 1 ? 'One reading has' : `${cells.length} readings have`} a decimal comma: {written}.
        Is {meant} meant?
      </span>
      <Button onClick={read}>Yes, with a point</Button>
      <Button onClick={empty}>No, empty {cells.length === 1 ? 'it' : 'them'}</Button>
    </div>
  );
}
