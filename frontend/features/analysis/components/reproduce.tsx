import type { StudyResult } from '#analysis/study/run-study.ts';
import type { RunDto } from '#schemas/api/analysis.ts';
import { Caution } from '../../../components/caution.tsx';
import { Card } from '../../../components/card.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';

/** What the same bytes come from, and where the same numbers can be had without us. */
export function Reproduce({ run, result }: { run: RunDto; result: StudyResult }) {
  const facts: [string, string][] = [
    ['Plan', `${run.plan.name}${run.plan.version === null ? ', draft' : `, version ${run.plan.version}`}`],
    ['Plan hash', run.plan.hash],
    ['Cut', `${run.cut.number} (${run.cut.kind})`],
    ['Cut hash', run.cut.sha256],
    ['Engine', result.engineVersion],
    ['Seed', String(run.seed)],
    ['Result hash', run.resultSha256 ?? ''],
    ['Asked for by', `${run.requestedBy}, ${formatMoment(run.requestedAt)}`],
  ];
  return (
    <Card title="How to reproduce">
      <p>
        The same plan, cut, engine version and seed give the same bytes. An approved export holds the
        analysis-ready table, the numbers and an R script that finds them again.
      </p>
      <dl className="mt-2 grid grid-cols-[8rem_1fr] gap-x-4 gap-y-1 text-sm">
        {facts.map(([term, value]) => (
          <div key={term} className="contents">
            <dt className="text-ink-soft">{term}</dt>
            <dd className="font-mono break-all">{value}</dd>
          </div>
        ))}
      </dl>
    </Card>
  );
}

/** Where the models stop being right. */
export function ResultCautions({ result }: { result: StudyResult }) {
  return (
    <Caution title="What these numbers rest on">
      The split follows Poiseuille’s law with a viscosity from a published law: a change of hindrance is read
      as a change of calibre only where length, number and branching of vessels stay the same.
      {result.cautions.map(({ code, message, moments }) => (
        <span key={code} className="block">
          {message} ({moments} measurements)
        </span>
      ))}
      <span className="block">
        Research use only, under an approved protocol; not for diagnosis or treatment.
      </span>
    </Caution>
  );
}
