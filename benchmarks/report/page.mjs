/** Parts of docs/validation.md that scripts write: what stands between the markers <!-- NAME --> and <!-- /NAME -->. */
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';

const page = new URL('../../docs/validation.md', import.meta.url);
const figures = new URL('../../docs/figures/', import.meta.url);

/** Replaces one part. Throws when the page has lost its markers. */
export function writePart(name, text) {
  const [open, close] = [`<!-- ${name} -->`, `<!-- /${name} -->`];
  const before = readFileSync(page, 'utf8');
  const [from, to] = [before.indexOf(open), before.indexOf(close)];
  if (from < 0 || to < from) throw new Error(`docs/validation.md has lost its markers ${open} and ${close}`);
  writeFileSync(page, `${before.slice(0, from + open.length)}\n\n${text}\n\n${before.slice(to)}`);
}

/** Writes a figure into docs/figures. */
export function writeFigure(name, svg) {
  mkdirSync(figures, { recursive: true });
  writeFileSync(new URL(name, figures), `${svg}\n`);
}

/** A table in Markdown; columns whose title begins with a colon stand to the left, the others to the right. */
export function table(columns, rows) {
  const titles = columns.map((title) => title.replace(/^:/, ''));
  const line = (cells) => `| ${cells.join(' | ')} |`;
  return [line(titles), line(columns.map((title) => (title.startsWith(':') ? ':---' : '---:'))), ...rows.map(line)].join('\n');
}
