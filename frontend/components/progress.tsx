import { formatCount } from '../lib/format/numbers.ts';
import { Button } from './button.tsx';

interface ProgressProps {
  label: string;
  done: number;
  total: number | undefined;
  /** What is counted: "fields verified". */
  noun: string;
  onCancel?: () => void;
}

/** Long work by counts: "24 of 38 fields verified", with a way to stop it. */
export function Progress({ label, done, total, noun, onCancel }: ProgressProps) {
  const words =
    total === undefined
      ? `${formatCount(done)} ${noun}`
      : `${formatCount(done)} of ${formatCount(total)} ${noun}`;
  return (
    <div className="flex items-center gap-3 text-sm">
      <span className="text-ink-soft">{words}</span>
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={total}
        aria-valuenow={total === undefined ? undefined : done}
        aria-valuetext={words}
        className="h-1.5 min-w-24 flex-1 overflow-hidden rounded-full bg-rule-soft"
      >
        <div
          className="h-full bg-moss"
          style={{ width: total ? `${Math.min(100, (done / total) * 100)}%` : '0%' }}
        />
      </div>
      {onCancel && <Button onClick={onCancel}>Stop</Button>}
    </div>
  );
}
