import mixedModel from '../../reference/statistics/linear-mixed-model-orthodont.json' with { type: 'json' };
import { AnalysisError } from '../core/analysis-error.ts';

type Numbers = Record<string, number>;

/** The file of expected values for models of the distances of Potthoff and Roy 1964. */
interface MixedModelReference {
  /** Row numbers in the file whose value is empty in the second version of the data. */
  six_missing: number[];
  rows: [subject: string, sex: string, age: number, value: number][];
  cases: {
    name: string;
    data: 'complete' | 'six_missing';
    plan: Record<string, unknown>;
    estimates: Numbers;
    tables: Record<string, Numbers[]>;
  }[];
}

/** Models of the published distances with the values that R gives. */
export const mixedModelReference = mixedModel as unknown as MixedModelReference;

/** The published distances as a data file; `visit` repeats the age. */
export function orthodontCsv(emptied: readonly number[] = []): string {
  const lines = mixedModelReference.rows.map(([subject, sex, age, value], i) =>
    [subject, sex, age, age, emptied.includes(i + 2) ? '' : value].join(','),
  );
  return ['subject,sex,age,visit,value', ...lines].join('\n');
}

/** Code and fields of the refusal, null if there is none. */
export function failureOf(work: () => unknown): Record<string, unknown> | null {
  try {
    work();
  } catch (error) {
    if (error instanceof AnalysisError) return { code: error.code, ...error.fields };
    throw error;
  }
  return null;
}
