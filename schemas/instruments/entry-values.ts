/** A value as it lies at an address: a scalar, the choices ticked, or the reason why there is none. */
export type EntryValue = string | number | boolean | string[] | { missing: string };

/**
 * The content of an entry, address → value.
 *
 * `"/height"` a field, `"/group/height"` a field of a group, `"/systolic/2"` the third reading,
 * `"/systolic/2!rejected"` the reason why that reading was set aside.
 */
export type EntryValues = Record<string, EntryValue>;

/** Whether an address holds a reason instead of a value. */
export function isMissing(value: EntryValue | undefined): value is { missing: string } {
  return typeof value === 'object' && !Array.isArray(value);
}
