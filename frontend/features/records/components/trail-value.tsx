import type { TrailValue } from '#schemas/api/records.ts';
import { HiddenValue } from '../../../components/pen-mark.tsx';

/** A value in the trail, or why it is not shown. */
export function TrailValueText({ value }: { value: TrailValue }) {
  if (value === null) return <em className="text-ink-soft">nothing</em>;
  if ('hidden' in value) return <HiddenValue />;
  if ('redacted' in value) return <em>redacted</em>;
  const { value: held, written } = value;
  const text = written ?? (typeof held === 'string' ? held : JSON.stringify(held, null, 1));
  return <span className="break-words whitespace-pre-wrap">{text}</span>;
}
