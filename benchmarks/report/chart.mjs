/** Small charts as SVG: bars over classes, and points with lines on two number axes. Equal input gives equal bytes. */
import { LIGHT_THEME as theme } from 'tordial';

const escaped = (text) => text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;');
const px = (value) => String(Math.round(value * 100) / 100);
const label = (value) => String(value).replace('-', '\u2212');
const text = (x, y, content, { anchor = 'middle', size = 11, fill = theme.ink, turn = '' } = {}) =>
  `<text x="${px(x)}" y="${px(y)}" text-anchor="${anchor}" font-size="${size}" fill="${fill}"${turn}>${escaped(content)}</text>`;
const line = (x1, y1, x2, y2, stroke, more = '') =>
  `<line x1="${px(x1)}" y1="${px(y1)}" x2="${px(x2)}" y2="${px(y2)}" stroke="${stroke}"${more}/>`;

const WIDTH = 640;
const HEIGHT = 340;
const PLOT = { left: 64, right: WIDTH - 20, top: 44, bottom: HEIGHT - 54 };

/** Colours of the series, in their order. */
const COLOURS = [theme.curve, theme.barrier, theme.well];

/** The whole picture: title, axis titles, legend and what is drawn inside. */
function picture({ title, x, y, series }, inside) {
  const { left, right, top, bottom } = PLOT;
  const legend = series.map((name, n) => {
    const at = right - 150 * (series.length - n) + 10;
    return `<rect x="${px(at)}" y="${top - 16}" width="9" height="9" fill="${COLOURS[n]}"/>${text(at + 14, top - 8, name, { anchor: 'start' })}`;
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${HEIGHT}" viewBox="0 0 ${WIDTH} ${HEIGHT}" role="img" font-family="${escaped(theme.fontFamily)}">`,
    `<title>${escaped(title)}</title><rect width="${WIDTH}" height="${HEIGHT}" fill="${theme.background}"/>`,
    text(left, 18, title, { anchor: 'start', size: 13 }),
    ...legend,
    ...inside,
    `<rect x="${left}" y="${top}" width="${right - left}" height="${bottom - top}" fill="none" stroke="${theme.line}"/>`,
    text((left + right) / 2, HEIGHT - 12, x, { size: 12 }),
    text(18, (top + bottom) / 2, y, { size: 12, turn: ` transform="rotate(-90 18 ${px((top + bottom) / 2)})"` }),
    '</svg>',
  ].join('');
}

function rulers(ticks, at, vertical) {
  const { left, right, top, bottom } = PLOT;
  return ticks.flatMap((value) =>
    vertical
      ? [line(left, at(value), right, at(value), theme.grid), text(left - 8, at(value) + 4, label(value), { anchor: 'end' })]
      : [line(at(value), top, at(value), bottom, theme.grid), text(at(value), bottom + 17, label(value))],
  );
}

/** Bars over named classes, one bar a series side by side. `counts[series][class]`; `ticks` of the count axis, the last one its end. */
export function barChart({ title, x, y, series, classes, counts, ticks }) {
  const { left, right, top, bottom } = PLOT;
  const wide = (right - left) / classes.length;
  const bar = (0.76 * wide) / series.length;
  const height = (count) => bottom - ((bottom - top - 14) * count) / ticks.at(-1);
  const bars = counts.flatMap((row, s) =>
    row.flatMap((count, c) => {
      if (count === 0) return [];
      const at = left + wide * (c + 0.12) + bar * s;
      return [
        `<rect x="${px(at)}" y="${px(height(count))}" width="${px(bar - 1)}" height="${px(bottom - height(count))}" fill="${COLOURS[s]}"/>`,
        text(at + bar / 2, height(count) - 3, String(count), { size: 9 }),
      ];
    }),
  );
  const names = classes.map((name, c) => text(left + wide * (c + 0.5), bottom + 17, name, { size: 10 }));
  return picture({ title, x, y, series }, [...rulers(ticks, height, true), ...bars, ...names]);
}

/**
 * Points and lines. `series`: names; `points[series]`: [x, y] pairs drawn as dots; `lines`: { points, colour: series number } drawn below
 * them; the ticks span the axes.
 */
export function scatterChart({ title, x, y, series, points, lines = [], xTicks, yTicks }) {
  const { left, right, top, bottom } = PLOT;
  const across = (value) => left + ((right - left) * (value - xTicks[0])) / (xTicks.at(-1) - xTicks[0]);
  const up = (value) => bottom - ((bottom - top) * (value - yTicks[0])) / (yTicks.at(-1) - yTicks[0]);
  const path = ({ points: row, colour, dashed }) =>
    `<polyline points="${row.map(([u, v]) => `${px(across(u))},${px(up(v))}`).join(' ')}" fill="none" stroke="${colour === undefined ? theme.line : COLOURS[colour]}" stroke-width="1.6"${dashed ? ' stroke-dasharray="4 3"' : ''}/>`;
  // filled and open marks, so that points of two series on one spot both show
  const dots = points.flatMap((row, s) =>
    row.map(
      ([u, v]) =>
        `<circle cx="${px(across(u))}" cy="${px(up(v))}" r="${s === 0 ? 3 : 4.5}" fill="${s === 0 ? COLOURS[0] : 'none'}" stroke="${COLOURS[s]}" stroke-width="1.2"/>`,
    ),
  );
  return picture({ title, x, y, series }, [...rulers(yTicks, up, true), ...rulers(xTicks, across, false), ...lines.map(path), ...dots]);
}
