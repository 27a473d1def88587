import type { StudyResult } from '#analysis/study/run-study.ts';
import { Card } from '../../../components/card.tsx';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { formatNumber, formatP, formatPercent } from '../../../lib/format/numbers.ts';
import { outcomeNames, ratio, ratioInterval } from '../model/words.ts';

const loaded = <T,>(data: readonly T[]) => ({ data, error: null, refetch: () => undefined });

/** Ratios with intervals, and the two one-sided tests where a margin was signed. */
export function RatioTable({ result }: { result: StudyResult }) {
  const { effects, equivalence } = result;
  const columns: Column<StudyResult['effects'][number]>[] = [
    { header: 'Quantity', cell: ({ outcome }) => outcomeNames[outcome] },
    { header: 'Ratio', numeric: true, cell: (effect) => ratio(effect.ratio) },
    { header: 'Interval', numeric: true, cell: ratioInterval },
    {
      header: 't (df)',
      numeric: true,
      cell: ({ t, df }) =>
        `${formatNumber(t, { decimals: 2 })} (${formatNumber(df, { decimals: Number.isInteger(df) ? 0 : 1 })})`,
    },
    { header: 'p', numeric: true, cell: ({ pValue }) => formatP(pValue) },
    {
      header: 'p adjusted',
      numeric: true,
      cell: ({ pAdjusted }) => (pAdjusted === null ? '' : formatP(pAdjusted)),
    },
    { header: 'n', numeric: true, cell: ({ n }) => n },
  ];
  return (
    <Card title="Ratios of the changes" flush>
      <DataTable
        caption="Ratios of the changes"
        captionHidden
        columns={columns}
        query={loaded(effects)}
        rowKey={({ outcome }) => outcome}
        empty={{ title: 'No effect was estimated' }}
      />
      {equivalence !== null && (
        <p className="px-4 py-3">
          Two one-sided tests on {outcomeNames[equivalence.outcome]}, margins {ratio(equivalence.lower)} to{' '}
          {ratio(equivalence.upper)}: {formatPercent(equivalence.level)} interval {ratioInterval(equivalence)}
          , p {formatP(equivalence.pValue)} —{' '}
          {equivalence.equivalent ? 'inside the margins' : 'not shown to be inside the margins'}.
        </p>
      )}
    </Card>
  );
}

/** Shares, or the words that say why there are none. */
export function ShareCard({ result }: { result: StudyResult }) {
  const { split } = result;
  if (split === null) return null;
  const { shares, share } = split;
  const [lower, upper] = [share?.estimates['share_ci_lower'], share?.estimates['share_ci_upper']];
  return (
    <Card title="Share of the change">
      {shares.shown ? (
        <p>
          Viscosity part {formatPercent(shares.rheological)}, tone part {formatPercent(shares.vasomotor)}
          {typeof lower === 'number' && typeof upper === 'number' && (
            <>
              ; interval of the viscosity part {formatPercent(lower)} to {formatPercent(upper)} (Fieller)
            </>
          )}
          . Shares are of the group’s change and depend on the viscosity law; see the laws below.
        </p>
      ) : (
        <p>{shares.message}</p>
      )}
    </Card>
  );
}

/** The split under each law: the law matters more than the measurement. */
export function LawTable({ result }: { result: StudyResult }) {
  const { laws } = result.sensitivity;
  if (laws.length === 0) return null;
  const columns: Column<(typeof laws)[number]>[] = [
    { header: 'Viscosity law', cell: ({ label }) => label },
    { header: 'Viscosity part', numeric: true, cell: ({ rheological }) => ratio(rheological.ratio) },
    { header: 'Tone part', numeric: true, cell: ({ geometric }) => ratio(geometric.ratio) },
    { header: 'Tone part, interval', numeric: true, cell: ({ geometric }) => ratioInterval(geometric) },
    { header: 'Viscosity share', numeric: true, cell: ({ shareOfTotal }) => formatPercent(shareOfTotal) },
  ];
  return (
    <Card title={`${laws.length} laws`} note="the first is the plan’s" flush>
      <DataTable
        caption="The split under each viscosity law"
        captionHidden
        columns={columns}
        query={loaded(laws)}
        rowKey={({ label }) => label}
        empty={{ title: 'No law' }}
      />
    </Card>
  );
}

/** Other ways to the same question, and the check of the distribution. */
export function TwinTable({ result }: { result: StudyResult }) {
  const { twins } = result.sensitivity;
  const columns: Column<(typeof twins)[number]>[] = [
    { header: 'Analysis', cell: ({ label }) => label },
    { header: 'Outcome', cell: ({ outcome }) => outcomeNames[outcome] },
    { header: 'Found', cell: twinWords },
  ];
  return (
    <Card title="Assumptions and sensitivity" flush>
      <DataTable
        caption="Assumptions and sensitivity"
        captionHidden
        columns={columns}
        query={loaded(twins)}
        rowKey={({ key, outcome }) => key + outcome}
        empty={{ title: 'No further analysis' }}
      />
    </Card>
  );
}

function twinWords({ key, result, refused }: StudyResult['sensitivity']['twins'][number]): string {
  if (result === null) return `not possible: ${refused ?? ''}`;
  const value = (name: string): number => result.estimates[name] ?? NaN;
  if (key === 'shapiro-wilk')
    return `W ${formatNumber(value('w'), { decimals: 3 })}, p ${formatP(value('p_value'))}`;
  if (key === 'wilcoxon')
    return `pseudomedian ratio ${ratio(Math.exp(value('pseudomedian')))}, p ${formatP(value('p_value'))}`;
  return `ratio ${ratio(value('adjusted_treatment_ratio'))} (${ratio(value('adjusted_treatment_ratio_ci_lower'))} to ${ratio(value('adjusted_treatment_ratio_ci_upper'))}), p ${formatP(value('adjusted_treatment_p_value'))}`;
}

/** Everyone who is not in the numbers, each with the reason. */
export function LeftOutTable({ result }: { result: StudyResult }) {
  const columns: Column<StudyResult['leftOut'][number]>[] = [
    { header: 'Participant', cell: ({ participant }) => participant },
    { header: 'Reason', cell: ({ reason }) => reason },
  ];
  return (
    <Card title="Left out" note={`${result.leftOut.length} of ${result.flow.allocated}`} flush>
      <DataTable
        caption="Participants left out"
        captionHidden
        columns={columns}
        query={loaded(result.leftOut)}
        rowKey={({ participant }) => participant}
        empty={{ title: 'Nobody was left out' }}
      />
    </Card>
  );
}
