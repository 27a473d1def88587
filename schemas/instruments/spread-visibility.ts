import type { CompiledField } from './compiled-instrument.ts';
import type { Visibility } from './instrument.ts';

/**
 * Spreads what fields reveal along the graph, to everything that comes from them (RB-07).
 *
 * @param comesFrom pointer → the pointers it is computed from, read with, or asked for because of
 * @returns pointer → what the field reveals, its sources included
 */
export function spreadVisibility(
  fields: CompiledField[],
  comesFrom: Map<string, Iterable<string>>,
): Record<string, Visibility> {
  const spread: Record<string, Visibility> = {};
  for (const field of fields) {
    const reached = reachable(field.pointer, comesFrom);
    const sources = fields.filter(({ pointer }) => reached.has(pointer));
    spread[field.pointer] = {
      identifying: sources.some(({ visibility }) => visibility.identifying === 'quasi') ? 'quasi' : 'none',
      unblinding: sources.some(({ visibility }) => visibility.unblinding),
      // A number computed from a text is no longer anyone's own words.
      freeText: field.type === 'string' && sources.some(({ visibility }) => visibility.freeText),
    };
  }
  return spread;
}

/** A field and all that lies behind it; a circle (fields read in one act) is walked once. */
function reachable(start: string, comesFrom: Map<string, Iterable<string>>): Set<string> {
  const seen = new Set<string>();
  const waiting = [start];
  for (let pointer = waiting.pop(); pointer !== undefined; pointer = waiting.pop()) {
    if (seen.has(pointer)) continue;
    seen.add(pointer);
    waiting.push(...(comesFrom.get(pointer) ?? []));
  }
  return seen;
}
