import type { TextProblemDto } from '#schemas/api/instruments.ts';
import { lineAndColumn, placeOf, type JsonPlaces, type Span } from '#schemas/json/json-places.ts';

/** A problem at a JSON Pointer, with a part of the text that stands there when it is about an expression. */
interface PointedProblem {
  pointer: string;
  message: string;
  range?: { start: number; end: number };
}

/** What makes a text no JSON, or loses a part of it. */
export const jsonProblems = (text: string, { problems }: JsonPlaces): TextProblemDto[] =>
  problems.map(({ message, ...span }) => shown(text, span, { pointer: '', message }, 'error'));

/** A problem with the place in the text at which an editor shows it. */
export function placedProblem(
  text: string,
  places: JsonPlaces,
  problem: PointedProblem,
  severity: TextProblemDto['severity'],
): TextProblemDto {
  const { pointer, range } = problem;
  const value = places.places.get(pointer)?.value;
  if (range === undefined || value === undefined)
    return shown(text, placeOf(places, pointer), problem, severity);
  const from = insideString(text, value, range.start);
  const to = Math.max(from + 1, insideString(text, value, range.end));
  return shown(text, { from, to }, problem, severity);
}

/** The position in the text of a character of the string that stands there: escapes take more room than they mean. */
function insideString(text: string, { from, to }: Span, offset: number): number {
  let at = from + 1;
  for (let passed = 0; passed < offset && at < to - 1; passed += 1) {
    at += text[at] !== '\\' ? 1 : text[at + 1] === 'u' ? 6 : 2;
  }
  return at;
}

const shown = (
  text: string,
  { from, to }: Span,
  { pointer, message }: PointedProblem,
  severity: TextProblemDto['severity'],
): TextProblemDto => ({ pointer, message, severity, from, to, ...lineAndColumn(text, from) });
