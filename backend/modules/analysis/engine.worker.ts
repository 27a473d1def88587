import { AnalysisError } from '#analysis/statistics/core/analysis-error.ts';
import { runStudy, type StudyResult } from '#analysis/study/run-study.ts';
import type { StudyData } from '#analysis/study/study-data.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';

/** One run, off the main thread: the result, or the sentence why the data do not allow it. */
export default function run({
  plan,
  data,
}: {
  plan: StudyPlan;
  data: StudyData;
}): { result: StudyResult } | { refused: string } {
  try {
    return { result: runStudy(plan, data) };
  } catch (error) {
    if (error instanceof AnalysisError) return { refused: error.message };
    throw error;
  }
}
