import type { TextProblemDto } from '#schemas/api/instruments.ts';
import { StateMark } from './pen-mark.tsx';

interface ProblemListProps {
  problems: readonly TextProblemDto[];
  onGoTo: (problem: TextProblemDto) => void;
}

/** What is wrong with a text, line by line; each leads to its place. */
export function ProblemList({ problems, onGoTo }: ProblemListProps) {
  if (problems.length === 0) return <p className="text-ink-soft">Nothing stands against it.</p>;
  return (
    <ul className="flex flex-col gap-2">
      {problems.map((problem) => (
        <li key={`${problem.from} ${problem.message}`} className="flex flex-wrap items-baseline gap-x-3">
          <StateMark
            state={problem.severity === 'error' ? 'asks' : 'todo'}
            word={problem.severity === 'error' ? 'must be put right' : 'worth a look'}
          />
          <button type="button" className="text-left link" onClick={() => onGoTo(problem)}>
            Line {problem.line}
          </button>
          <span>{problem.message}</span>
        </li>
      ))}
    </ul>
  );
}
