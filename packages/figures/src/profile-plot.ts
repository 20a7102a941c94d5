import { atomicNumberOf, createMolecule, type Molecule, TordialError } from '@tordial/geometry';
import type { DocumentMolecule, ProfileDocument, ProfileStationaryPoint } from '@tordial/scan';
import { scaleLinear } from 'd3-scale';
import type { Box } from './boxes.js';
import { type CurveParts, type CurveSegment, curveParts, segmentEnergy } from './curve-parts.js';
import { degreesText, energyText } from './format.js';
import { describeNewman, newmanDrawing, newmanLayout } from './newman.js';
import { newmanStrip } from './newman-strip.js';
import { type PlacedLabel, placeLabels, type Segment } from './place-labels.js';
import { coordinate, element, escapeXml, svgDocument } from './svg.js';
import { fitText, textWidth } from './text-width.js';
import { type FigureTheme, LIGHT_THEME } from './theme.js';

export interface ProfilePlotOptions {
  /** px; 800 by default. */
  readonly width?: number;
  /** px; chosen by default so that the plot keeps its proportions under one or two rows of projections. */
  readonly height?: number;
  readonly theme?: FigureTheme;
  /** The molecule's name by default. */
  readonly title?: string;
}

const SIDE = { left: 66, right: 26 };
const HEADER = 60;
/** Height of the zone in which the leader lines run askew, from the projections to the frame. */
const LEADERS = { least: 22, most: 64, slope: 0.22 };
const AXIS = 46;
const FOOTER = 26;
const PLOT_HEIGHT = 300;
const LABEL_SIZE = 11;
const LINE_HEIGHT = 13;
/** Angles beyond this are shown at both edges, degrees. */
const EDGE = 179.95;
/** More projections than this are not drawn; the lowest wells and the highest barriers go first. */
const MOST_PROJECTIONS = 12;

/**
 * The figure of a torsion profile: the periodic curve over [-180, 180] with its points, wells and barriers with angle and energy, and a Newman
 * projection of the actual geometry at each. No smooth curve is drawn across a change of branch; points that did not converge are crossed.
 *
 * Returns an SVG document. Throws `figure/profile` for a size without room, what `profileCurve` throws for points that make no
 * curve and what `newmanLayout` throws for coordinates that do not fit.
 */
export function profilePlot(document: ProfileDocument, options: ProfilePlotOptions = {}): string {
  const figure = profileLayout(document, options);
  const { width, height, theme } = figure;
  return svgDocument(
    { width, height, title: figure.title, description: describe(document), background: theme.background },
    element(
      'g',
      { 'font-family': theme.fontFamily, 'font-size': LABEL_SIZE },
      ...header(document, figure),
      ...axes(document, figure),
      ...leaders(figure),
      ...curve(figure),
      ...markers(document, figure),
      ...stationaryLabels(figure),
      ...projections(figure),
      footer(document, figure),
    ),
  );
}

/** Where everything stands in a profile's figure, px. */
export interface ProfileLayout {
  readonly width: number;
  readonly height: number;
  readonly theme: FigureTheme;
  readonly title: string;
  readonly plot: Box;
  readonly x: (angle: number) => number;
  readonly y: (energy: number) => number;
  readonly energyTicks: readonly { readonly value: number; readonly text: string }[];
  readonly parts: CurveParts;
  readonly marks: readonly Mark[];
}

/** A stationary point on the page. */
export interface Mark {
  readonly point: ProfileStationaryPoint;
  readonly x: number;
  readonly y: number;
  /** Two lines, angle and energy; undefined where no free place was found. */
  readonly label: PlacedLabel | undefined;
  readonly lines: readonly [string, string];
  readonly projection: Projection | undefined;
}

interface Projection {
  readonly markup: string;
  readonly x: number;
  readonly y: number;
  readonly scale: number;
  readonly caption: string;
  readonly captionY: number;
  /** Height at which its leader line begins to run askew. */
  readonly bend: number;
  readonly words: string;
}

/** Lays a profile's figure out without drawing it. */
export function profileLayout(document: ProfileDocument, options: ProfilePlotOptions): ProfileLayout {
  const { theme = LIGHT_THEME, width = 800 } = options;
  const parts = curveParts(document);
  const segments = [...parts.smooth.flat(), ...parts.continued];

  const innerWidth = width - SIDE.left - SIDE.right;
  const x = (angle: number): number => SIDE.left + ((angle + 180) / 360) * innerWidth;
  const molecule = moleculeOf(document.molecule);
  const shown = projectedPoints(document.stationaryPoints);
  const layouts = shown.map(({ point }) => newmanLayout(molecule, document.rotor.torsion, point.coordinates));
  const stripLeft = 14;
  const strip = newmanStrip(
    shown.map(({ point }, n) => ({ x: x(shownAngle(point.angle)) - stripLeft, layout: layouts[n] })),
    width - 2 * stripLeft,
  );

  const askew = shown.map(({ point }, n) => Math.abs(stripLeft + strip.cards[n].x - x(shownAngle(point.angle))));
  const leaderZone = Math.min(LEADERS.most, Math.max(LEADERS.least, LEADERS.slope * Math.max(0, ...askew)));
  const top = HEADER + strip.height + (shown.length > 0 ? leaderZone : 0);
  const height = options.height ?? top + PLOT_HEIGHT + AXIS + FOOTER;
  const plot = { left: SIDE.left, right: width - SIDE.right, top, bottom: height - AXIS - FOOTER };
  if (plot.bottom - plot.top < 80 || innerWidth < 160)
    throw new TordialError(
      'figure/profile',
      `${width} by ${height} px leave no room for the plot; ask for at least ${top + 80 + AXIS + FOOTER} px of height`,
    );

  const energies = [
    ...segments.flatMap((segment) => samples(segment).map(([, energy]) => energy)),
    ...document.points.map(({ relativeEnergy }) => relativeEnergy),
    ...document.stationaryPoints.map(({ relativeEnergy }) => relativeEnergy),
  ];
  const lowest = Math.min(0, ...energies);
  const span = Math.max(Math.max(...energies) - lowest, 0.05);
  // room for two lines of text under the lowest well and over the highest barrier
  const headroom = (span * 44) / (plot.bottom - plot.top - 88);
  const scale = scaleLinear()
    .domain([lowest - headroom, lowest + span + headroom])
    .range([plot.bottom, plot.top]);
  const tickCount = Math.max(3, Math.round((plot.bottom - plot.top) / 50));
  const tickText = scale.tickFormat(tickCount);
  const energyTicks = scale
    .ticks(tickCount)
    .filter((value) => value >= lowest - 1e-9)
    .map((value) => ({ value, text: tickText(value) }));
  const y = (energy: number): number => scale(energy);

  const points = document.stationaryPoints.map((point) => ({ point, x: x(shownAngle(point.angle)), y: y(point.relativeEnergy) }));
  const lines = points.map(({ point }): [string, string] => [degreesText(point.angle), energyText(point.relativeEnergy, document.unit)]);
  const labels = placeLabels(
    points.map((point, n) => ({
      x: point.x,
      y: point.y,
      width: Math.max(textWidth(lines[n][0], LABEL_SIZE), textWidth(lines[n][1], LABEL_SIZE, true)),
      height: 2 * LINE_HEIGHT - 3,
      side: point.point.kind === 'well' ? 'below' : 'above',
    })),
    {
      boxes: [
        ...points.map((point) => ({ left: point.x - 5, right: point.x + 5, top: point.y - 5, bottom: point.y + 5 })),
        ...document.points.flatMap(({ angle, relativeEnergy, converged }) =>
          converged ? [] : [{ left: x(angle) - 5, right: x(angle) + 5, top: y(relativeEnergy) - 5, bottom: y(relativeEnergy) + 5 }],
        ),
      ],
      segments: [...chords(segments, x, y)],
      avoided: points.filter(({ point }) => point.kind === 'well').map((point): Segment => [point.x, plot.top, point.x, point.y - 6]),
    },
    plot,
  );

  const drawn = new Map(
    shown.map(({ point, shared }, n) => {
      const card = strip.cards[n];
      return [
        point,
        {
          markup: newmanDrawing(layouts[n], theme),
          x: stripLeft + card.x,
          y: HEADER + card.y,
          scale: strip.scale,
          caption: shared ? `±${degreesText(Math.abs(point.angle))}` : degreesText(point.angle),
          captionY: HEADER + card.captionY,
          bend: HEADER + strip.height + 4,
          words: describeNewman(layouts[n]),
        },
      ] as const;
    }),
  );
  return {
    width,
    height,
    theme,
    title: options.title ?? (document.molecule.name || document.molecule.smiles),
    plot,
    x,
    y,
    energyTicks,
    parts,
    marks: points.map((point, n) => ({ ...point, label: labels[n], lines: lines[n], projection: drawn.get(point.point) })),
  };
}

/** The molecule that a document describes. */
function moleculeOf({ elements, formalCharges, bonds, name }: DocumentMolecule): Molecule {
  return createMolecule({ atomicNumbers: elements.map(atomicNumberOf), formalCharges, bonds, name });
}

/** -180 and 180 are the same angle; it stands at the right edge. */
function shownAngle(angle: number): number {
  return angle < -EDGE ? angle + 360 : angle;
}

/**
 * The stationary points that get a projection, by angle. Where there are many, mirror images (opposite angles at the same energy) share one, and
 * beyond the limit the lowest wells and highest barriers are kept.
 */
function projectedPoints(all: readonly ProfileStationaryPoint[]): { point: ProfileStationaryPoint; shared: boolean }[] {
  let chosen = all.map((point) => ({ point, shared: false }));
  if (chosen.length > 7) {
    const mirrored = (p: ProfileStationaryPoint): boolean =>
      p.angle !== 0 &&
      all.some(
        (q) =>
          q !== p &&
          q.kind === p.kind &&
          degreesText(q.angle) === degreesText(-p.angle) &&
          Math.abs(q.relativeEnergy - p.relativeEnergy) < 0.005,
      );
    chosen = all.filter((point) => point.angle >= 0 || !mirrored(point)).map((point) => ({ point, shared: mirrored(point) }));
  }
  if (chosen.length > MOST_PROJECTIONS) {
    const wells = chosen.filter(({ point }) => point.kind === 'well').sort((p, q) => p.point.relativeEnergy - q.point.relativeEnergy);
    const barriers = chosen.filter(({ point }) => point.kind !== 'well').sort((p, q) => q.point.relativeEnergy - p.point.relativeEnergy);
    const half = MOST_PROJECTIONS / 2;
    chosen = [...wells.slice(0, half), ...barriers.slice(0, half)];
  }
  return chosen.sort((p, q) => shownAngle(p.point.angle) - shownAngle(q.point.angle));
}

/** How a branch is drawn beyond its last point. */
const CONTINUED = { 'stroke-width': 1.4, 'stroke-dasharray': '1.5 3' };

const SAMPLES = 8;

function samples(segment: CurveSegment): [number, number][] {
  return Array.from({ length: SAMPLES + 1 }, (_, n) => {
    const angle = segment.from + ((segment.to - segment.from) * n) / SAMPLES;
    return [angle, segmentEnergy(segment, angle)];
  });
}

function chords(segments: readonly CurveSegment[], x: (angle: number) => number, y: (energy: number) => number): Segment[] {
  return segments.flatMap((segment) => {
    const line = samples(segment);
    return line.slice(1).map(([angle, energy], n): Segment => [x(line[n][0]), y(line[n][1]), x(angle), y(energy)]);
  });
}

function text(x: number, y: number, content: string, attributes: Readonly<Record<string, string | number | undefined>>): string {
  return element('text', { x, y, ...attributes }, escapeXml(content));
}

function header({ molecule, rotor, points, stationaryPoints }: ProfileDocument, { width, plot, theme, title }: ProfileLayout): string[] {
  const entries: [string, string][] = [];
  const kinds = new Set(stationaryPoints.map(({ kind }) => kind));
  for (const kind of ['well', 'barrier', 'crossing'] as const)
    if (kinds.has(kind)) entries.push([kind === 'crossing' ? 'crossing of branches' : kind, kind]);
  if (points.some(({ breakAfter }) => breakAfter)) entries.push(['change of branch', 'break']);
  if (points.some(({ converged }) => !converged)) entries.push(['not converged', 'unconverged']);
  let right = plot.right;
  const legend: string[] = [];
  for (const [label, symbol] of entries.reverse()) {
    right -= textWidth(label, LABEL_SIZE);
    legend.push(text(right, 26, label, { fill: theme.quiet }));
    right -= 11;
    legend.push(symbol === 'break' ? breakSymbol(right - 3, 22, theme) : markSymbol(symbol, right, 22, theme));
    right -= 18;
  }
  const subtitle = [molecule.smiles === title ? '' : molecule.smiles, rotor.kind].filter((one) => one !== '').join('   ');
  return [
    text(plot.left, 27, fitText(title, right - plot.left, 16), { 'font-size': 16, 'font-weight': 'bold', fill: theme.ink }),
    text(plot.left, 44, fitText(subtitle, width - SIDE.left - SIDE.right, LABEL_SIZE), { fill: theme.quiet }),
    ...legend,
  ];
}

function breakSymbol(x: number, y: number, theme: FigureTheme): string {
  return element('line', { x1: x - 8, x2: x + 6, y1: y, y2: y, stroke: theme.curve, ...CONTINUED });
}

function axes(document: ProfileDocument, { plot, x, y, energyTicks, theme }: ProfileLayout): string[] {
  const wide = plot.right - plot.left > 420;
  const angles = Array.from({ length: wide ? 13 : 7 }, (_, n) => -180 + n * (wide ? 30 : 60));
  const grid = [
    ...angles.map((angle) => ({ x1: x(angle), x2: x(angle), y1: plot.top, y2: plot.bottom })),
    ...energyTicks.map(({ value }) => ({ x1: plot.left, x2: plot.right, y1: y(value), y2: y(value) })),
  ].map((line) => element('line', { ...line, stroke: theme.grid, 'stroke-width': 1 }));
  const { elements } = document.molecule;
  const atoms = document.rotor.torsion.map((atom) => `${elements[atom]}${atom}`).join('–');
  const middle = (plot.top + plot.bottom) / 2;
  const titleX = 20;
  return [
    ...grid,
    element('rect', {
      x: plot.left,
      y: plot.top,
      width: plot.right - plot.left,
      height: plot.bottom - plot.top,
      fill: 'none',
      stroke: theme.line,
      'stroke-width': 1,
    }),
    ...angles.flatMap((angle) => [
      element('line', { x1: x(angle), x2: x(angle), y1: plot.bottom, y2: plot.bottom + 4, stroke: theme.line }),
      text(x(angle), plot.bottom + 17, String(angle).replace('-', '−'), { 'text-anchor': 'middle', fill: theme.ink }),
    ]),
    ...energyTicks.flatMap(({ value, text: label }) => [
      element('line', { x1: plot.left - 4, x2: plot.left, y1: y(value), y2: y(value), stroke: theme.line }),
      text(plot.left - 8, y(value) + 4, label, { 'text-anchor': 'end', fill: theme.ink }),
    ]),
    text((plot.left + plot.right) / 2, plot.bottom + 37, `Torsion angle ${atoms} (degree)`, {
      'text-anchor': 'middle',
      'font-size': 12,
      fill: theme.ink,
    }),
    text(titleX, middle, `Relative energy (${document.unit})`, {
      'text-anchor': 'middle',
      'font-size': 12,
      fill: theme.ink,
      transform: `rotate(-90 ${coordinate(titleX)} ${coordinate(middle)})`,
    }),
  ];
}

/** From each projection to the frame and on to its point; a label that stands in the way ends the line, so that it reads as one with it. */
function leaders({ marks, plot, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ x, y, label, projection }) => {
    if (!projection) return [];
    const start = projection.captionY + 5;
    const bend = projection.bend;
    const stop = label && label.box.left < x && label.box.right > x && label.box.bottom < y ? label.box.top - 2 : y - 7;
    return [
      element('path', {
        d: `M ${coordinate(projection.x)} ${coordinate(start)} V ${coordinate(bend)} L ${coordinate(x)} ${coordinate(plot.top)}`,
        fill: 'none',
        stroke: theme.line,
        'stroke-width': 0.8,
      }),
      stop > plot.top
        ? element('line', { x1: x, x2: x, y1: plot.top, y2: stop, stroke: theme.line, 'stroke-width': 0.8, 'stroke-dasharray': '1 3' })
        : '',
    ];
  });
}

function curve({ parts, x, y, theme }: ProfileLayout): string[] {
  const at = (angle: number, energy: number): string => `${coordinate(x(angle))} ${coordinate(y(energy))}`;
  const path = (run: readonly CurveSegment[]): string => {
    const curves = run.map(({ from, to, energies: [, b, c, d] }) => {
      const third = (to - from) / 3;
      return `C ${at(from + third, b)} ${at(to - third, c)} ${at(to, d)}`;
    });
    return `M ${at(run[0].from, run[0].energies[0])} ${curves.join(' ')}`;
  };
  const stroke = { fill: 'none', stroke: theme.curve };
  return [
    ...parts.smooth.map((run) => element('path', { d: path(run), ...stroke, 'stroke-width': 2, 'stroke-linecap': 'round' })),
    ...parts.continued.map((segment) => element('path', { d: path([segment]), ...stroke, ...CONTINUED })),
  ];
}

function markers({ points }: ProfileDocument, { marks, x, y, theme }: ProfileLayout): string[] {
  const scanned = points.flatMap(({ angle, relativeEnergy, converged }) =>
    atBothEdges(angle).map((shown) =>
      converged
        ? element('circle', {
            cx: x(shown),
            cy: y(relativeEnergy),
            r: 2.3,
            fill: theme.background,
            stroke: theme.curve,
            'stroke-width': 1.2,
          })
        : markSymbol('unconverged', x(shown), y(relativeEnergy), theme),
    ),
  );
  const stationary = marks.flatMap(({ point, y: height }) =>
    atBothEdges(point.angle).map((shown) => markSymbol(point.kind, x(shown), height, theme)),
  );
  return [...scanned, ...stationary];
}

/** A point at -180 is also the one at 180. */
function atBothEdges(angle: number): number[] {
  if (angle < -EDGE) return [angle, angle + 360];
  return angle > EDGE ? [angle - 360, angle] : [angle];
}

function markSymbol(kind: string, x: number, y: number, theme: FigureTheme): string {
  const around = { stroke: theme.background, 'stroke-width': 1 };
  if (kind === 'well') return element('circle', { cx: x, cy: y, r: 4.6, fill: theme.well, ...around });
  const diamond = [`M ${coordinate(x)} ${coordinate(y - 5.6)}`, 'l 5.6 5.6', 'l -5.6 5.6', 'l -5.6 -5.6', 'Z'].join(' ');
  if (kind === 'barrier') return element('path', { d: diamond, fill: theme.barrier, ...around });
  if (kind === 'crossing') return element('path', { d: diamond, fill: theme.background, stroke: theme.crossing, 'stroke-width': 1.6 });
  const cross = [`M ${coordinate(x - 4)} ${coordinate(y - 4)}`, 'l 8 8', `M ${coordinate(x - 4)} ${coordinate(y + 4)}`, 'l 8 -8'].join(' ');
  return element('path', { d: cross, fill: 'none', stroke: theme.unconverged, 'stroke-width': 1.8 });
}

function stationaryLabels({ marks, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ point, label, lines }) => {
    if (!label) return [];
    const { box, tie } = label;
    const middle = (box.left + box.right) / 2;
    return [
      tie ? element('line', { x1: tie[0], y1: tie[1], x2: tie[2], y2: tie[3], stroke: theme.line, 'stroke-width': 0.8 }) : '',
      element('rect', {
        x: box.left,
        y: box.top,
        width: box.right - box.left,
        height: box.bottom - box.top,
        fill: theme.background,
        'fill-opacity': '0.85',
      }),
      text(middle, box.top + LINE_HEIGHT - 4, lines[0], { 'text-anchor': 'middle', fill: theme.ink }),
      text(middle, box.top + 2 * LINE_HEIGHT - 4.5, lines[1], { 'text-anchor': 'middle', 'font-weight': 'bold', fill: theme[point.kind] }),
    ];
  });
}

function projections({ marks, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ point, projection }) => {
    if (!projection) return [];
    const { x, y, scale, markup, caption, captionY } = projection;
    return [
      element('g', { transform: `translate(${coordinate(x)} ${coordinate(y)}) scale(${scale.toFixed(4)})` }, markup),
      text(x, captionY, caption, { 'text-anchor': 'middle', 'font-size': 10.5, 'font-weight': 'bold', fill: theme[point.kind] }),
    ];
  });
}

function footer(document: ProfileDocument, { plot, height, width, theme, marks }: ProfileLayout): string {
  const { settings, provenance, notes } = document;
  const { program, version, potential } = provenance;
  const parts = [
    potential,
    `${settings.kind} scan`,
    `${settings.step}° steps`,
    settings.kind === 'relaxed' ? `${settings.conformers} starting conformer${settings.conformers === 1 ? '' : 's'}` : '',
    `seed ${settings.seed}`,
    notes.length > 0 ? `${notes.length} note${notes.length === 1 ? '' : 's'} in the document` : '',
    marks.some(({ label }) => !label) ? 'labels without room left out' : '',
    `${program} ${version}`,
  ];
  const line = parts.filter((one) => one !== '').join('  ·  ');
  return text(plot.left, height - 12, fitText(line, width - SIDE.left - SIDE.right, 10), { 'font-size': 10, fill: theme.quiet });
}

/** The figure in words. */
function describe({ molecule, rotor, unit, stationaryPoints, points }: ProfileDocument): string {
  const list = stationaryPoints.map(
    ({ kind, angle, relativeEnergy }) => `${kind} at ${degreesText(angle)}, ${energyText(relativeEnergy, unit)} ${unit}`,
  );
  const unconverged = points.filter(({ converged }) => !converged).length;
  return [
    `Torsion profile of ${molecule.name || molecule.smiles} about the bond ${rotor.axis.join('–')}, ${points.length} points.`,
    list.length > 0 ? `${list.join('; ')}.` : 'No stationary points.',
    unconverged > 0 ? `${unconverged} points did not converge.` : '',
  ]
    .filter((one) => one !== '')
    .join(' ');
}
