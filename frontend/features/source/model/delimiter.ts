/** What parts the cells, told from the first line. A decimal comma then stays inside its cell. */
export function delimiterOf(text: string): string {
  const head = text.slice(0, text.search(/[\r\n]|$/));
  return [';', '\t'].find((mark) => head.includes(mark)) ?? ',';
}
