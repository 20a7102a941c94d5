import { atomicNumberOf, createMolecule, type Molecule, TordialError } from '@tordial/geometry';
import { type DocumentMolecule, isOpen, type ProfileDocument, type ProfileStationaryPoint } from '@tordial/scan';
import { type AngleDomain, angleScale, type EnergyScale, energyScale } from './axes.js';
import type { Box } from './boxes.js';
import { type CurveParts, type CurveSegment, curveParts, segmentEnergy } from './curve-parts.js';
import { degreesText, energyText } from './format.js';
import { describeNewman, type NewmanLayout, newmanDrawing, newmanLayout } from './newman.js';
import { type NewmanStrip, newmanStrip } from './newman-strip.js';
import { type PlacedLabel, placeLabels, type Segment } from './place-labels.js';
import { textWidth } from './text-width.js';
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

export const SIDE = { left: 66, right: 26 };
export const LABEL_SIZE = 11;
export const LINE_HEIGHT = 13;
const HEADER = 60;
/** Height of the zone in which the leader lines run askew, from the projections to the frame. */
const LEADERS = { least: 22, most: 64, slope: 0.22 };
const AXIS = 46;
const FOOTER = 26;
const PLOT_HEIGHT = 300;
/** Room for two lines of text over the highest barrier and under the lowest well, px. */
const LABEL_ROOM = 44;
/** The axis spans at least this much, in the document's unit. */
const SMALLEST_RANGE = 0.05;
/** Angles beyond this are shown at both edges, degrees. */
const EDGE = 179.95;
/** A change of branch this near to a crossing is that crossing, degrees. */
const SAME_ANGLE = 1;
/** Mirror images differ by less, in the document's unit. */
const SAME_ENERGY = 0.005;
/** More projections than this are not drawn; the lowest wells and the highest barriers go first. */
const MOST_PROJECTIONS = 12;

/** Where everything stands in a profile's figure, px. */
export interface ProfileLayout {
  readonly width: number;
  readonly height: number;
  readonly theme: FigureTheme;
  readonly title: string;
  readonly plot: Box;
  readonly x: (angle: number) => number;
  /** First and last angle of the axis. */
  readonly domain: AngleDomain;
  /** Where an angle stands on the axis: twice where both edges are the same angle. */
  readonly shown: (angle: number) => number[];
  readonly energies: EnergyScale;
  readonly parts: CurveParts;
  readonly marks: readonly Mark[];
  /** Stationary points without a projection of their own or shared. */
  readonly leftOut: number;
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

/** A Newman projection on the page; its drawing is centred on the circle. */
export interface Projection {
  readonly markup: string;
  readonly x: number;
  readonly y: number;
  readonly scale: number;
  readonly caption: string;
  readonly captionY: number;
  /** Height at which its leader line begins to run askew. */
  readonly bend: number;
  /** In words. */
  readonly words: string;
}

/** Lays a profile's figure out without drawing it. */
export function profileLayout(document: ProfileDocument, options: ProfilePlotOptions): ProfileLayout {
  const { theme = LIGHT_THEME, width = 800 } = options;
  const open = isOpen(document);
  const domain: AngleDomain = open ? [document.points[0].angle, document.points[document.points.length - 1].angle] : [-180, 180];
  const shownAngle = open ? (angle: number) => angle : onRightEdge;
  const curve = curveParts(document.points, { open });
  const crossings = document.stationaryPoints.filter(({ kind }) => kind === 'crossing');
  // a crossing has a mark of its own
  const parts = {
    ...curve,
    changes: curve.changes.filter((change) => !crossings.some(({ angle }) => apart(angle, change.angle) < SAME_ANGLE)),
  };
  const segments = [...parts.smooth.flat(), ...parts.estimated];

  const x = angleScale({ left: SIDE.left, right: width - SIDE.right }, domain);
  const molecule = moleculeOf(document.molecule);
  const drawable = document.stationaryPoints
    .map((point) => ({ point, layout: newmanLayout(molecule, document.rotor.torsion, point.coordinates) }))
    .sort((p, q) => shownAngle(p.point.angle) - shownAngle(q.point.angle));
  const stripLeft = 14;
  const stripOf = (all: readonly Drawable[]): NewmanStrip =>
    newmanStrip(
      all.map(({ point, layout }) => ({ x: x(shownAngle(point.angle)) - stripLeft, layout })),
      width - 2 * stripLeft,
    );
  const everything = stripOf(drawable);
  const shown = everything.rows === 1 ? drawable.map((one) => ({ ...one, shared: false })) : fewer(drawable);
  const strip = everything.rows === 1 ? everything : stripOf(shown);

  const askew = shown.map(({ point }, n) => Math.abs(stripLeft + strip.cards[n].x - x(shownAngle(point.angle))));
  const leaderZone = Math.min(LEADERS.most, Math.max(LEADERS.least, LEADERS.slope * Math.max(0, ...askew)));
  const top = HEADER + strip.height + (shown.length > 0 ? leaderZone : 0);
  const height = options.height ?? top + PLOT_HEIGHT + AXIS + FOOTER;
  const plot = { left: SIDE.left, right: width - SIDE.right, top, bottom: height - AXIS - FOOTER };
  if (plot.bottom - plot.top < 80 || plot.right - plot.left < 160)
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
  const highest = Math.max(lowest + SMALLEST_RANGE, ...energies);
  const scale = energyScale(lowest, highest, plot, LABEL_ROOM);
  const { y } = scale;

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
        ...points.map((point) => markBox(point.x, point.y)),
        ...document.points.flatMap(({ angle, relativeEnergy, converged }) => (converged ? [] : [markBox(x(angle), y(relativeEnergy))])),
        ...parts.changes.map(({ angle, energy }) => markBox(x(angle), y(energy))),
      ],
      segments: chords(segments, x, y),
      avoided: points.filter(({ point }) => point.kind === 'well').map((point): Segment => [point.x, plot.top, point.x, point.y - 6]),
    },
    plot,
  );

  const drawn = new Map(
    shown.map(({ point, layout, shared }, n) => {
      const card = strip.cards[n];
      return [
        point,
        {
          markup: newmanDrawing(layout, theme),
          x: stripLeft + card.x,
          y: HEADER + card.y,
          scale: strip.scale,
          caption: shared ? `±${degreesText(Math.abs(point.angle))}` : degreesText(point.angle),
          captionY: HEADER + card.captionY,
          bend: HEADER + strip.height + 4,
          words: describeNewman(layout),
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
    domain,
    shown: open ? (angle) => [angle] : atBothEdges,
    energies: scale,
    parts,
    leftOut: document.stationaryPoints.length - shown.reduce((sum, { shared }) => sum + (shared ? 2 : 1), 0),
    marks: points.map((point, n) => ({ ...point, label: labels[n], lines: lines[n], projection: drawn.get(point.point) })),
  };
}

/** Degrees between two angles, the short way round. */
function apart(p: number, q: number): number {
  const turn = Math.abs(p - q) % 360;
  return Math.min(turn, 360 - turn);
}

/** The molecule that a document describes. */
function moleculeOf({ elements, formalCharges, bonds, name }: DocumentMolecule): Molecule {
  return createMolecule({ atomicNumbers: elements.map(atomicNumberOf), formalCharges, bonds, name });
}

/** -180 and 180 are the same angle; it stands at the right edge. */
function onRightEdge(angle: number): number {
  return angle < -EDGE ? angle + 360 : angle;
}

/** A stationary point with its projection. */
interface Drawable {
  readonly point: ProfileStationaryPoint;
  readonly layout: NewmanLayout;
}

/**
 * Where there is no room for all projections, mirror images (opposite angles at the same energy) share one, drawn now on this side and now on the
 * other; beyond the limit the lowest wells and highest barriers are kept.
 */
function fewer(all: readonly Drawable[]): (Drawable & { readonly shared: boolean })[] {
  const mirrorOf = ({ point: p }: Drawable): Drawable | undefined =>
    all.find(
      ({ point: q }) =>
        q !== p &&
        q.kind === p.kind &&
        degreesText(q.angle) === degreesText(-p.angle) &&
        Math.abs(q.relativeEnergy - p.relativeEnergy) < SAME_ENERGY,
    );
  let pairs = 0;
  let chosen = all.flatMap((one) => {
    const mirror = mirrorOf(one);
    if (!mirror) return [{ ...one, shared: false }];
    if (one.point.angle < 0) return [];
    return [{ ...(pairs++ % 2 === 0 ? one : mirror), shared: true }];
  });
  if (chosen.length > MOST_PROJECTIONS) {
    const wells = chosen.filter(({ point }) => point.kind === 'well').sort((p, q) => p.point.relativeEnergy - q.point.relativeEnergy);
    const maxima = chosen.filter(({ point }) => point.kind !== 'well').sort((p, q) => q.point.relativeEnergy - p.point.relativeEnergy);
    const half = MOST_PROJECTIONS / 2;
    chosen = [...wells.slice(0, half), ...maxima.slice(0, half)];
  }
  return chosen.sort((p, q) => onRightEdge(p.point.angle) - onRightEdge(q.point.angle));
}

function markBox(x: number, y: number): Box {
  return { left: x - 5, right: x + 5, top: y - 5, bottom: y + 5 };
}

const SAMPLES = 6;

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

/** A point at -180 is also the one at 180. */
export function atBothEdges(angle: number): number[] {
  if (angle < -EDGE) return [angle, angle + 360];
  return angle > EDGE ? [angle - 360, angle] : [angle];
}
