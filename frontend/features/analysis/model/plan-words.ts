import { viscosityLaws } from '#analysis/haemorheology/viscosity-laws.ts';
import { outcomes, type OutcomeKey } from '#analysis/study/study-plan.ts';
import { outcomeNames } from './words.ts';

/** A paragraph of a readable plan: its heading and its words. */
interface PlanLine {
  heading: string;
  words: string;
}

interface Members {
  [member: string]: unknown;
}

const members = (value: unknown): Members | null =>
  typeof value === 'object' && value !== null && !Array.isArray(value) ? (value as Members) : null;

const missing = 'not said yet';

const plain = (value: unknown): string => {
  if (typeof value === 'string') return value.trim() === '' ? missing : value;
  if (typeof value === 'number') return String(value);
  if (value === undefined || value === null) return missing;
  return JSON.stringify(value);
};

const outcome = (value: unknown): string =>
  outcomes.includes(value as OutcomeKey) ? outcomeNames[value as OutcomeKey] : plain(value);

function law(value: unknown): string {
  const chosen = members(value);
  if (chosen === null) return plain(value);
  const name = viscosityLaws.find(({ id }) => id === chosen['law'])?.name ?? plain(chosen['law']);
  const parameters = [
    chosen['shearRate'] === undefined ? [] : `shear rate ${plain(chosen['shearRate'])} /s`,
    chosen['diameter'] === undefined ? [] : `tube diameter ${plain(chosen['diameter'])} µm`,
  ].flat();
  return parameters.length === 0 ? name : `${name}, ${parameters.join(', ')}`;
}

const list = (value: unknown, words: (item: unknown) => string): string =>
  !Array.isArray(value) ? plain(value) : value.length === 0 ? 'none' : value.map(words).join('; ');

function viscosity(value: unknown): string {
  if (value === null) return 'No blood is sampled, so the change is not split.';
  const chosen = members(value);
  if (chosen === null) return plain(value);
  const { plasma } = chosen;
  const from =
    plasma === 'measured' ? 'as measured' : typeof plasma === 'number' ? `${plasma} mPa·s` : plain(plasma);
  return `${law(chosen['law'])}; plasma viscosity ${from}.`;
}

function equivalence(value: unknown): string {
  if (value === null) return 'No claim that an outcome hardly changes.';
  const claim = members(value);
  if (claim === null) return plain(value);
  return `The ${outcome(claim['outcome'])} hardly changes if its ratio lies between ${plain(claim['lower'])} and ${plain(claim['upper'])}, by two one-sided tests.`;
}

const methodWords: Record<string, string> = {
  crossover_2x2: 'within participants over both periods, on logarithms',
  ancova_change: 'change from baseline between groups, adjusted for baseline, on logarithms',
  paired_t: 'paired differences within participants, on logarithms',
};
const multiplicityWords: Record<string, string> = {
  none: 'not adjusted',
  holm: 'Holm’s step-down procedure',
  fixed_sequence: 'in the fixed order of the outcomes',
};
const flowWords: Record<string, string> = {
  forearmBloodFlow: 'forearm blood flow',
  brachialBloodFlow: 'brachial artery blood flow',
};
const named = (names: Record<string, string>, value: unknown): string =>
  typeof value === 'string' ? (names[value] ?? value) : plain(value);

/** A plan in words, as far as it is written; any content is read, valid or not. */
export function planLines(content: unknown): PlanLine[] {
  const plan = members(content) ?? {};
  const conditions = plan['conditions'];
  const line = (heading: string, words: string): PlanLine => ({ heading, words });
  return [
    line('Question', plain(plan['estimand'])),
    line('Design', plain(plan['design'])),
    line(
      'Compared',
      Array.isArray(conditions) && conditions.length === 2
        ? `${plain(conditions[0])} over ${plain(conditions[1])}`
        : conditions === null
          ? 'times, within one group'
          : plain(conditions),
    ),
    line('Times', `${plain(plan['timePoint'])} against ${plain(plan['baselineTimePoint'])}`),
    line('Flow', named(flowWords, plan['flow'])),
    line('Viscosity law', viscosity(plan['viscosity'])),
    line('Primary outcome', outcome(plan['primary'])),
    line('Secondary outcomes', list(plan['secondary'], outcome)),
    line('Method', named(methodWords, plan['method'])),
    line('Equivalence', equivalence(plan['equivalence'])),
    line(
      'Confidence',
      typeof plan['confidence'] === 'number' ? `${100 * plan['confidence']} %` : plain(plan['confidence']),
    ),
    line('Several outcomes', named(multiplicityWords, plan['multiplicity'])),
    line('Missing values', plain(plan['missingData'])),
    line('Laws shown beside', list(plan['sensitivityLaws'], law)),
    line('Seed', plain(plan['seed'])),
  ];
}

export const planTitle = (content: unknown): string => plain(members(content)?.['title']);
