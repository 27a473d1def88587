import type { VerdictDto } from '#schemas/api/instruments.ts';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import type { SampleEntry } from '#schemas/instruments/instrument.ts';
import { Button } from '#frontend/components/button.tsx';
import { SelectField, TextField } from '#frontend/components/fields.tsx';
import { StateMark } from '#frontend/components/pen-mark.tsx';
import { ExpectedDerived } from './expected-derived.tsx';

type Outcome = SampleEntry['expect']['outcome'];
type Result = VerdictDto['samples'][number];

const outcomes = [
  { value: 'passes', label: 'passes' },
  { value: 'asks', label: 'asks for a confirmation' },
  { value: 'refused', label: 'is refused' },
];
const outcomeWords: Record<Outcome, string> = { passes: 'passes', asks: 'asks', refused: 'is refused' };

interface SampleTableProps {
  samples: readonly SampleEntry[];
  /** What came of each, by position; missing while the schema has problems. */
  results: readonly Result[];
  onChange: (samples: SampleEntry[]) => void;
  onLoad: (sample: SampleEntry) => void;
  /** Keeps what is in the form as a sample. */
  onKeep: () => void;
  /** The derived fields, whose values a sample may say. */
  derived: readonly CompiledField[];
}

/** Sample values with what must come of them; publication waits until all come out as said (IV-03). */
export function SampleTable({ samples, results, onChange, onLoad, onKeep, derived }: SampleTableProps) {
  const put = (at: number, sample: SampleEntry) =>
    onChange(samples.map((other, index) => (index === at ? sample : other)));
  return (
    <div className="flex flex-col gap-3 p-4">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button onClick={onKeep}>Keep the values in the form as a sample</Button>
        <p className="text-sm text-ink-soft">
          Say what must come of each: an ordinary one that passes, one at each limit, one that a check turns
          away.
        </p>
      </div>
      {samples.length === 0 ? (
        <p className="text-ink-soft">
          No sample yet. An instrument is tried before it is published: at least once.
        </p>
      ) : (
        <ol className="flex flex-col">
          {samples.map((sample, at) => (
            // Samples have no key of their own, and two may have one name.
            <li key={at} className="flex flex-col gap-2 border-t border-rule-soft py-3">
              <div className="grid items-end gap-3 lg:grid-cols-[minmax(0,1fr)_14rem_auto]">
                <TextField
                  label={`Sample ${at + 1}`}
                  value={sample.name}
                  maxLength={120}
                  onChange={(event) => put(at, { ...sample, name: event.target.value })}
                />
                <SelectField
                  label="Must come out"
                  choices={outcomes}
                  value={sample.expect.outcome}
                  onChange={(event) =>
                    put(at, {
                      ...sample,
                      expect: { ...withoutChecks(sample.expect), outcome: event.target.value as Outcome },
                    })
                  }
                />
                <span className="flex gap-3 pb-1">
                  <Button variant="quiet" onClick={() => onLoad(sample)}>
                    Fill into the form
                  </Button>
                  <Button
                    variant="quiet"
                    aria-label={`Remove sample ${at + 1}`}
                    onClick={() => onChange(samples.filter((_, index) => index !== at))}
                  >
                    Remove
                  </Button>
                </span>
              </div>
              <SampleResult sample={sample} result={results[at]} />
              <ExpectedDerived
                derived={derived}
                expected={sample.expect.derived ?? {}}
                onChange={(values) => put(at, { ...sample, expect: { ...sample.expect, derived: values } })}
              />
            </li>
          ))}
        </ol>
      )}
    </div>
  );
}

/** Another outcome comes with other findings: the list of them is said anew by what comes out. */
function withoutChecks({ checks: _checks, ...rest }: SampleEntry['expect']): SampleEntry['expect'] {
  return rest;
}

function SampleResult({ sample, result }: { sample: SampleEntry; result: Result | undefined }) {
  const also = [
    ...(sample.expect.checks === undefined ? [] : [`findings ${sample.expect.checks.join(', ') || 'none'}`]),
    ...Object.entries(sample.expect.derived ?? {}).map(
      ([pointer, value]) => `${pointer} = ${JSON.stringify(value)}`,
    ),
  ];
  return (
    <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1 text-sm">
      {result === undefined ? (
        <StateMark state="todo" word="not tried: the schema has problems" />
      ) : (
        <StateMark
          state={result.passed ? 'settled' : 'asks'}
          word={`${outcomeWords[result.outcome]}${result.passed ? ', as said' : ', not as said'}`}
        />
      )}
      {result?.checks.length ? <span>Findings: {result.checks.join(', ')}</span> : null}
      {also.length > 0 && <span className="text-ink-soft">Also expected: {also.join('; ')}</span>}
      {result?.differences.map((difference) => (
        <p key={difference} className="w-full text-arterial">
          {difference}
        </p>
      ))}
    </div>
  );
}
