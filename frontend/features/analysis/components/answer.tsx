import type { StudyResult } from '#analysis/study/run-study.ts';
import type { RunDto } from '#schemas/api/analysis.ts';
import { Caution } from '../../../components/caution.tsx';
import { standingWords } from '../model/words.ts';

const underlines = {
  total: 'border-b-2 border-arterial',
  viscosity: 'border-b-2 border-venous',
  tone: 'border-b-2 border-ink-soft',
  verdict: 'font-semibold',
} as const;

/** The answer in one sentence, before anything else; how it stands comes with it. */
export function Answer({ run, result }: { run: RunDto; result: StudyResult }) {
  const { allocated, analysed } = result.flow;
  return (
    <section aria-label="The answer" className="rounded-md border border-rule bg-paper p-5">
      {run.standing !== 'planned' && (
        <Caution title="How this run stands">{standingWords[run.standing]}</Caution>
      )}
      <p className="max-w-4xl text-xl leading-relaxed text-soot">
        {result.sentence.map(({ text, mark }, at) =>
          mark === undefined ? (
            <span key={at}>{text}</span>
          ) : (
            <span key={at} className={underlines[mark]}>
              {text}
            </span>
          ),
        )}
      </p>
      <p className="mt-2 text-sm text-ink-soft">
        {allocated} allocated, {analysed} analysed, {result.leftOut.length} left out
        {result.law !== null && <> · viscosity by {result.law}</>} · {standingWords[run.standing]}
      </p>
    </section>
  );
}
