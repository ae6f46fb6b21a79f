/**
 * A CSV text (RFC 4180). Texts that a spreadsheet would take for a formula get an apostrophe in front; numbers
 * are written as numbers, so a negative one stays one.
 */
export function toCsv(
  head: readonly string[],
  rows: readonly (readonly (string | number | null)[])[],
): string {
  return `${[head, ...rows].map((row) => row.map(cell).join(',')).join('\r\n')}\r\n`;
}

function cell(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  // biome-ignore lint/suspicious/noControlCharactersInRegex: a leading NUL or tab starts a formula too
  const safe = /^[=+\-@\t\r\u0000]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** A file name that is safe in a header. */
export function fileName(...parts: string[]): string {
  return parts.join('-').replace(/[^A-Za-z0-9.-]+/g, '-');
}
