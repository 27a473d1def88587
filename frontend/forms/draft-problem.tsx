import { Button } from '../components/button.tsx';
import { FieldError } from '../components/field.tsx';
import { useFieldState, useForm } from './form-context.ts';

/** Why what was typed is no value yet; a decimal comma is asked about, never silently read as a point (DE-07). */
export function DraftProblem({ address }: { address: string }) {
  const { store } = useForm();
  const { problem } = useFieldState(address);
  if (!problem) return null;
  const { suggestion, message } = problem;
  if (suggestion === undefined) return <FieldError>{message}</FieldError>;
  return (
    <span className="flex flex-wrap items-center gap-2 rounded-r border-l-3 border-straw bg-straw-wash px-3 py-1.5 text-sm text-straw-ink">
      {message}
      <Button
        onClick={() => store.change({ pointer: address, value: Number(suggestion), written: suggestion })}
      >
        Yes, {suggestion}
      </Button>
      <Button onClick={() => store.dropDraft(address)}>No, empty it</Button>
    </span>
  );
}
