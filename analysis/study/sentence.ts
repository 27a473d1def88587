import type { Effect } from './effect.ts';
import type { OutcomeKey, StudyPlan } from './study-plan.ts';

/** A piece of the answer's sentence; marked pieces are underlined in the colour of their part. */
export interface SentencePart {
  text: string;
  mark?: 'total' | 'viscosity' | 'tone' | 'verdict';
}

export interface EquivalenceVerdict {
  outcome: OutcomeKey;
  lower: number;
  upper: number;
  pValue: number;
  /** Confidence level of the interval below: 1 − 2α. */
  level: number;
  ratioLower: number;
  ratioUpper: number;
  equivalent: boolean;
}

export type Verdict =
  'rheological-tone-unchanged' | 'tone-unchanged' | 'tone-changed' | 'changed' | 'inconclusive';

const percent = (ratio: number): number => 100 * (ratio - 1);
const minus = (text: string): string => text.replace('-', '−');
const rounded = (value: number): string => minus(value.toFixed(Math.abs(value) < 9.95 ? 1 : 0));
const signed = (value: number): string => (value > 0 ? `+${rounded(value)}` : rounded(value));

const names: Record<OutcomeKey, string> = {
  resistance: 'forearm vascular resistance',
  conductance: 'vascular conductance',
  viscosity: 'blood viscosity',
  hindrance: 'the tone part',
};

/** "−25 % (95 % CI −30 to −20 %)": a ratio as a change, with its interval. */
export function changeWords(effect: Effect, confidence: number): string {
  const level = `${Number((100 * confidence).toFixed(1))} % CI`;
  const [lower, upper] = [effect.ratioLower, effect.ratioUpper].map((ratio) => signed(percent(ratio)));
  return `${signed(percent(effect.ratio))} % (${level} ${lower} to ${upper} %)`;
}

const excludesNone = ({ logLower, logUpper }: Effect): boolean => logLower > 0 || logUpper < 0;

/** What may be claimed, by the intervals and the margin that was signed; never by a p-value alone. */
export function verdictOf(
  main: Effect,
  geometric: Effect | null,
  equivalence: EquivalenceVerdict | null,
): Verdict {
  const toneUnchanged = equivalence?.outcome === 'hindrance' && equivalence.equivalent;
  if (geometric !== null) {
    if (toneUnchanged) return excludesNone(main) ? 'rheological-tone-unchanged' : 'tone-unchanged';
    return excludesNone(geometric) ? 'tone-changed' : 'inconclusive';
  }
  return excludesNone(main) ? 'changed' : 'inconclusive';
}

const verdictWords: Record<Verdict, string> = {
  'rheological-tone-unchanged': 'the change is rheological; no change of tone larger than the margin.',
  'tone-unchanged': 'no change of tone larger than the margin.',
  'tone-changed': 'the tone of the vessels changed.',
  changed: 'a change was found.',
  inconclusive: 'inconclusive: the interval holds both no change and changes that would matter.',
};

/** The answer in one sentence, in pieces; the same words on screen, in print and in the archive. */
export function answerSentence(
  plan: StudyPlan,
  labels: ReadonlyMap<string, string>,
  found: {
    main: Effect;
    rheological: Effect | null;
    geometric: Effect | null;
    equivalence: EquivalenceVerdict | null;
    verdict: Verdict;
  },
): SentencePart[] {
  const { main, rheological, geometric, equivalence, verdict } = found;
  const word = (key: string): string => labels.get(key) ?? key;
  const [x, y] = plan.conditions ?? ['', ''];
  const subject = plan.conditions ? capital(word(x)) : capital(plan.timePoint);
  const against = plan.conditions ? ` against ${uncapital(word(y))}` : ` against ${plan.baselineTimePoint}`;
  const mark = main.outcome === 'viscosity' ? 'viscosity' : main.outcome === 'hindrance' ? 'tone' : 'total';
  const parts: SentencePart[] = [
    { text: `${subject}: ${names[main.outcome]} ` },
    { text: changeWords(main, plan.confidence), mark },
    { text: `${against}. ` },
  ];
  if (rheological !== null && geometric !== null && main.outcome === 'resistance') {
    parts.push(
      { text: 'Viscosity part ' },
      { text: changeWords(rheological, plan.confidence), mark: 'viscosity' },
      { text: '; tone part ' },
      { text: changeWords(geometric, plan.confidence), mark: 'tone' },
    );
    if (equivalence !== null && equivalence.outcome === 'hindrance') {
      const margin = `${signed(percent(equivalence.lower))} to ${signed(percent(equivalence.upper))} %`;
      parts.push({
        text: `${equivalence.equivalent ? ', inside' : ', not shown to be inside'} the margin of ${margin} signed beforehand: `,
      });
    } else parts.push({ text: ': ' });
  } else parts.push({ text: 'In short: ' });
  parts.push({ text: verdictWords[verdict], mark: 'verdict' });
  return parts;
}

/** A label within a sentence; an abbreviation keeps its capitals. */
const uncapital = (text: string): string =>
  /^\p{Lu}\p{Ll}/u.test(text) ? text.charAt(0).toLowerCase() + text.slice(1) : text;

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
