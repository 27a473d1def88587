import { classNames } from './class-names.ts';

/** How the drum's stylus would leave a state. */
const traces = {
  /** to do: flat line */
  todo: 'M1 9H17',
  /** under way: rising */
  underway: 'M1 9H5L15 2',
  /** settled: rise and level */
  settled: 'M1 9H4L8 3H17',
  /** asks for you: spike */
  asks: 'M1 9H6L9 1L12 9H17',
  /** missed or late: broken line */
  late: 'M1 9H6M9 9H11M14 9H17',
  /** hidden from you: dotted */
  hidden: 'M1 9H1.5M5 9H5.5M9 9H9.5M13 9H13.5M17 9H17.5',
} as const;

export type PenState = keyof typeof traces;

/** The mark alone: only beside its word, so it says nothing to screen readers. */
export function PenMark({ state }: { state: PenState }) {
  return (
    <svg
      width="18"
      height="11"
      viewBox="0 0 18 11"
      aria-hidden
      className={classNames('inline-block shrink-0', state === 'asks' && 'text-arterial')}
    >
      <path
        d={traces[state]}
        fill="none"
        stroke="currentColor"
        strokeWidth="1.7"
        strokeLinejoin="round"
        strokeLinecap="round"
        strokeDasharray={state === 'settled' ? '24' : undefined}
        className={state === 'settled' ? 'animate-[settle_150ms_ease-out]' : undefined}
      />
    </svg>
  );
}

/** A state: its pen mark and its word. `<StateMark state="settled" word="complete" />` */
export function StateMark({ state, word, className }: { state: PenState; word: string; className?: string }) {
  return (
    <span
      data-state={state}
      className={classNames(
        'inline-flex items-center gap-1.5 text-sm whitespace-nowrap max-sm:whitespace-normal',
        state === 'asks' && 'text-arterial',
        className,
      )}
    >
      <PenMark state={state} />
      {word}
    </span>
  );
}

/** A value that the viewer may not know, in its place: layout, order and timing tell nothing. */
export function HiddenValue({ word = 'entered · hidden until unblinding' }: { word?: string }) {
  return <StateMark state="hidden" word={word} className="text-ink-soft" />;
}
