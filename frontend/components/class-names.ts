/** Joins class names, leaving out what does not hold: `classNames('a', active && 'b')`. */
export const classNames = (...names: (string | false | null | undefined)[]) =>
  names.filter(Boolean).join(' ');
