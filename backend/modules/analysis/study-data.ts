import type { StudyData } from '#analysis/study/study-data.ts';
import type { CutHead, CutLine } from './cut-file.ts';

/** The part of a cut that the engine works on. Only those allocated are analysed; all enrolled are counted. */
export async function studyDataOf(
  lines: AsyncIterable<CutLine>,
): Promise<{ head: CutHead; data: StudyData }> {
  let head: CutHead | undefined;
  const participants: { participant: string; sequence: string | null }[] = [];
  const measures: StudyData['measures'][number][] = [];
  for await (const line of lines) {
    if (line.line === 'study') head = line;
    else if (line.line === 'participant' && line.state !== 'screening' && line.state !== 'consented') {
      participants.push({ participant: line.participant, sequence: line.sequence });
    } else if (line.line === 'measure' && line.condition !== null) {
      const { participant, condition, timePoint, quantity, value, reason } = line;
      measures.push({ participant, period: line.period ?? 1, condition, timePoint, quantity, value, reason });
    }
  }
  if (head === undefined) throw new Error('This is no cut: its first line is missing.');
  return { head, data: { conditions: head.conditions, participants, measures, excluded: [] } };
}
