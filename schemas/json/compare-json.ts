/** One difference between two JSON values. Items of a list that have a `key` or an `id` are named by it. */
export interface JsonChange {
  path: string[];
  kind: 'added' | 'removed' | 'changed' | 'reordered';
  before?: unknown;
  after?: unknown;
}

interface CompareOptions {
  /** Whether the order of an object's members says something at this path, as with the fields of a form. */
  ordered?: (path: readonly string[]) => boolean;
}

type Members = ReadonlyMap<string, unknown>;

/**
 * What was added, removed, changed or put in another order. A part that is new as a whole is one change;
 * lists of plain values are compared as wholes, lists of named things item by item.
 */
export function compareJson(before: unknown, after: unknown, options: CompareOptions = {}): JsonChange[] {
  const changes: JsonChange[] = [];
  const { ordered = () => false } = options;

  const visit = (one: unknown, other: unknown, path: string[]): void => {
    if (one === other) return;
    const [members, otherMembers] = [membersOf(one), membersOf(other)];
    if (members === undefined || otherMembers === undefined || Array.isArray(one) !== Array.isArray(other)) {
      if (!sameJson(one, other)) changes.push({ path, kind: 'changed', before: one, after: other });
      return;
    }
    for (const [name, value] of members) {
      if (!otherMembers.has(name)) changes.push({ path: [...path, name], kind: 'removed', before: value });
    }
    for (const [name, value] of otherMembers) {
      if (members.has(name)) visit(members.get(name), value, [...path, name]);
      else changes.push({ path: [...path, name], kind: 'added', after: value });
    }
    if (Array.isArray(one) || ordered(path)) visitOrder([...members.keys()], [...otherMembers.keys()], path);
  };

  const visitOrder = (names: string[], otherNames: string[], path: string[]): void => {
    const [kept, otherKept] = [
      names.filter((name) => otherNames.includes(name)),
      otherNames.filter((name) => names.includes(name)),
    ];
    if (kept.join('\n') === otherKept.join('\n')) return;
    changes.push({ path, kind: 'reordered', before: kept, after: otherKept });
  };

  visit(before, after, []);
  return changes;
}

/** The named parts of an object, or of a list of named things; undefined for everything else. */
function membersOf(value: unknown): Members | undefined {
  if (typeof value !== 'object' || value === null) return undefined;
  if (!Array.isArray(value)) return new Map(Object.entries(value));
  const named = value.map(nameOf);
  if (named.some((name) => name === undefined) || new Set(named).size < named.length) return undefined;
  return new Map(value.map((item: unknown, index) => [named[index] ?? '', item]));
}

function nameOf(item: unknown): string | undefined {
  if (typeof item !== 'object' || item === null) return undefined;
  const { key, id } = item as { key?: unknown; id?: unknown };
  const name = key ?? id;
  return typeof name === 'string' ? name : undefined;
}

/** Equality of JSON values; the order of members does not count. */
function sameJson(one: unknown, other: unknown): boolean {
  if (one === other) return true;
  if (typeof one !== 'object' || typeof other !== 'object' || one === null || other === null) return false;
  if (Array.isArray(one) !== Array.isArray(other)) return false;
  const names = Object.keys(one);
  if (names.length !== Object.keys(other).length) return false;
  return names.every(
    (name) =>
      Object.hasOwn(other, name) &&
      sameJson((one as Record<string, unknown>)[name], (other as Record<string, unknown>)[name]),
  );
}
