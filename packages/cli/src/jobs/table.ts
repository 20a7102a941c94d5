/** A table for people: columns padded to their widest cell, numbers to the right. */
export function table(columns: readonly string[], rows: readonly (readonly string[])[]): string {
  const widths = columns.map((title, n) => Math.max(title.length, ...rows.map((row) => row[n].length)));
  const numeric = columns.map((_, n) => rows.every((row) => /^[-+]?[\d.]*$/.test(row[n])));
  const line = (cells: readonly string[]): string =>
    `  ${cells.map((cell, n) => (numeric[n] ? cell.padStart(widths[n]) : cell.padEnd(widths[n]))).join('  ')}`.trimEnd();
  return `${[columns, ...rows].map(line).join('\n')}\n`;
}
