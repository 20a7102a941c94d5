import { bondBetween, type Molecule, neighboursOf, TordialError } from '@tordial/geometry';
import { type Box, boundingBox, boxesOverlap, segmentMeetsBox } from './boxes.js';
import { degreesText } from './format.js';
import { type GroupLabel, groupLabel, labelRuns, labelText, labelWidth, reversedLabel, SCRIPT_SCALE } from './group-label.js';
import { element, escapeXml, svgDocument } from './svg.js';
import { textWidth } from './text-width.js';
import { type FigureTheme, LIGHT_THEME } from './theme.js';

const DEGREES = 180 / Math.PI;

/** Lengths of a projection before it is scaled, px: the rear atom's rim, the ends of the bonds, the labels. */
const RIM = 18;
const FRONT_END = 30;
const REAR_END = 33;
const LABEL_RADIUS = 33;
const FONT_SIZE = 11;
const CAP_HEIGHT = 0.73 * FONT_SIZE;
const LABEL_GAP = 3;
/** In a figure of its own the circle's radius is at most this fraction of the side. */
const LARGEST_RIM = 0.16;
/** Labels that would touch are turned about the centre, away from each other, up to this angle. */
const LARGEST_NUDGE = 55;
const NUDGE = 1.25;

/** Smaller torsion angles are not marked by a wedge, degrees; the front bond would hide it. */
const SMALLEST_WEDGE = 25;

/** A substituent whose bond makes a smaller angle than this with the axis has no direction in the projection. */
const SMALLEST_OFF_AXIS = 8 / DEGREES;

/** One substituent of the front or the rear atom. */
export interface NewmanSubstituent {
  readonly atom: number;
  readonly side: 'front' | 'rear';
  /** Direction of the bond, degrees clockwise from the front atom's torsion-defining substituent, in [0, 360). */
  readonly angle: number;
  /** Angle at which the label stands; differs from `angle` where labels would touch. */
  readonly labelAngle: number;
  /** Whether the atom is one of the four that define the torsion. */
  readonly defining: boolean;
  /** The bond is drawn double or triple; bonds within a ring are drawn single. */
  readonly order: number;
  /** Read from the bond outwards. */
  readonly label: GroupLabel;
  /** Whether the label is written towards the bond, right-aligned. */
  readonly leftwards: boolean;
  /** Where the label stands. */
  readonly box: Box;
  readonly baseline: number;
}

/** A projection about its centre at (0, 0), px. */
export interface NewmanLayout {
  /** Torsion angle, degrees in (-180, 180]. */
  readonly torsion: number;
  readonly substituents: readonly NewmanSubstituent[];
  /** Groups that lie on the axis itself (a linear chain) and have no direction. */
  readonly onAxis: readonly { readonly side: 'front' | 'rear'; readonly text: string; readonly box: Box }[];
  readonly bounds: Box;
}

/**
 * Projects a geometry along a rotor's axis: the observer looks from the second torsion atom (front) to the third (rear), the first one points up.
 * A positive torsion angle turns clockwise from the front to the rear substituent (IUPAC convention; M. S. Newman, J. Chem. Educ. 32, 344 (1955)).
 *
 * `coordinates`: angstrom, x0 y0 z0 x1 ... Throws `figure/newman` when the atoms are no chain of three bonds, when the coordinates are not those of
 * the molecule, or when the first or last bond lies on the axis.
 */
export function newmanLayout(
  molecule: Molecule,
  torsion: readonly [number, number, number, number],
  coordinates: ArrayLike<number>,
): NewmanLayout {
  const [first, front, rear, last] = torsion;
  if (coordinates.length !== 3 * molecule.atomCount)
    throw new TordialError('figure/newman', `${coordinates.length} coordinates for ${molecule.atomCount} atoms; three an atom are needed`);
  for (const [a, b] of [
    [first, front],
    [front, rear],
    [rear, last],
  ])
    if (bondBetween(molecule, a, b) < 0)
      throw new TordialError('figure/newman', `atoms ${a} and ${b} are not bonded; a projection needs a chain of four atoms`, { atom: a });

  const view = normalised(difference(coordinates, rear, front));
  const up = offAxis(coordinates, first, front, view);
  const lastDirection = offAxis(coordinates, last, rear, view);
  if (!up || !lastDirection)
    throw new TordialError('figure/newman', 'an end bond of the torsion lies on its axis, so that its angle is not defined', {
      atom: up ? last : first,
    });
  const right = cross(view, up);
  const clockwise = (direction: Vector): number => {
    const angle = Math.atan2(dot(direction, right), dot(direction, up)) * DEGREES;
    return angle < 0 ? angle + 360 : angle;
  };

  const bonds: Bond[] = [];
  const lying: { side: 'front' | 'rear'; text: string }[] = [];
  for (const [side, centre, other] of [
    ['front', front, rear],
    ['rear', rear, front],
  ] as const)
    for (const atom of neighboursOf(molecule, centre)) {
      if (atom === other) continue;
      const direction = offAxis(coordinates, atom, centre, view);
      const label = groupLabel(molecule, atom, centre);
      if (!direction) {
        lying.push({ side, text: `${side}: ${labelText(label)}` });
        continue;
      }
      const inRing = molecule.rings.some((ring) => ring.includes(atom) && ring.includes(centre));
      bonds.push({
        atom,
        side,
        angle: atom === first && side === 'front' ? 0 : clockwise(direction),
        defining: (side === 'front' && atom === first) || (side === 'rear' && atom === last),
        order: inRing ? 1 : molecule.bonds.order[bondBetween(molecule, atom, centre)],
        label,
      });
    }
  const substituents = placeLabels(bonds);
  const circle = { left: -RIM - 1, top: -RIM - 1, right: RIM + 1, bottom: RIM + 1 };
  const extent = boundingBox([circle, ...substituents.map(({ box }) => box), ...bonds.map(bondBox)]);
  const onAxis = lying.map(({ side, text }, n) => {
    const width = textWidth(text, 0.85 * FONT_SIZE);
    const top = extent.bottom + 4 + n * 1.2 * FONT_SIZE;
    return { side, text, box: { left: -width / 2, top, right: width / 2, bottom: top + FONT_SIZE } };
  });
  const signed = clockwise(lastDirection);
  return {
    torsion: signed > 180 ? signed - 360 : signed,
    substituents,
    onAxis,
    bounds: boundingBox([extent, ...onAxis.map(({ box }) => box)]),
  };
}

type Vector = readonly [number, number, number];
type Bond = Pick<NewmanSubstituent, 'atom' | 'side' | 'angle' | 'defining' | 'order' | 'label'>;

function difference(x: ArrayLike<number>, i: number, j: number): Vector {
  return [x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]];
}

function dot(p: Vector, q: Vector): number {
  return p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
}

function cross(p: Vector, q: Vector): Vector {
  return [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
}

function normalised(p: Vector): Vector {
  const length = Math.sqrt(dot(p, p));
  return [p[0] / length, p[1] / length, p[2] / length];
}

/** Unit vector of the bond centre-atom seen along the axis; undefined where the bond lies on the axis. */
function offAxis(x: ArrayLike<number>, atom: number, centre: number, view: Vector): Vector | undefined {
  const bond = normalised(difference(x, atom, centre));
  const along = dot(bond, view);
  const across: Vector = [bond[0] - along * view[0], bond[1] - along * view[1], bond[2] - along * view[2]];
  return Math.sqrt(dot(across, across)) < Math.sin(SMALLEST_OFF_AXIS) ? undefined : normalised(across);
}

function bondEnd(side: 'front' | 'rear'): number {
  return side === 'front' ? FRONT_END : REAR_END;
}

function pointAt(angle: number, radius: number): [number, number] {
  return [radius * Math.sin(angle / DEGREES), -radius * Math.cos(angle / DEGREES)];
}

function bondBox({ angle, side }: Bond): Box {
  const [x, y] = pointAt(angle, bondEnd(side));
  return { left: Math.min(0, x), right: Math.max(0, x), top: Math.min(0, y), bottom: Math.max(0, y) };
}

/** The label is written so that the atom that is bonded stands nearest to the bond: to the right of the centre H3C-, to the left -CH3 reversed. */
function setLabel(bond: Bond, labelAngle: number): NewmanSubstituent {
  const [sine, minusCosine] = pointAt(labelAngle, 1);
  const leftwards = sine < -0.12;
  const width = labelWidth(bond.label, FONT_SIZE, bond.defining);
  const bonded = Math.min(width, labelWidth(bond.label.slice(0, 1), FONT_SIZE, bond.defining));
  // the bonded atom's letters as an ellipse that the bond must not enter
  const reach = Math.hypot((bonded / 2) * sine, (CAP_HEIGHT / 2) * minusCosine) + LABEL_GAP;
  const [x, y] = pointAt(labelAngle, LABEL_RADIUS + reach);
  const left = leftwards ? x + bonded / 2 - width : x - bonded / 2;
  const lowered = labelRuns(bond.label).some(({ shift }) => shift === 'subscript') ? 0.2 * FONT_SIZE : 0;
  return {
    ...bond,
    leftwards,
    labelAngle,
    baseline: y + CAP_HEIGHT / 2,
    box: { left, right: left + width, top: y - CAP_HEIGHT / 2, bottom: y + CAP_HEIGHT / 2 + lowered },
  };
}

/** Turns labels about the centre until none touches another or a bond that is not its own. */
function placeLabels(bonds: readonly Bond[]): NewmanSubstituent[] {
  const sorted = [...bonds].sort((p, q) => p.angle - q.angle || (p.side === q.side ? p.atom - q.atom : p.side === 'front' ? -1 : 1));
  const placed = sorted.map((bond) => setLabel(bond, bond.angle));
  const turn = (n: number, by: number): void => {
    const nudge = placed[n].labelAngle + by - sorted[n].angle;
    if (Math.abs(nudge) <= LARGEST_NUDGE) placed[n] = setLabel(sorted[n], sorted[n].angle + nudge);
  };
  for (let round = 0; round < 2 * LARGEST_NUDGE; round++) {
    let touched = false;
    for (let i = 0; i < placed.length; i++) {
      for (let j = i + 1; j < placed.length; j++)
        if (boxesOverlap(placed[i].box, placed[j].box, 2)) {
          touched = true;
          const clockwise = turnFrom(placed[i].labelAngle, placed[j].labelAngle) >= 0 ? 1 : -1;
          turn(i, -NUDGE * clockwise);
          turn(j, NUDGE * clockwise);
        }
      for (let j = 0; j < placed.length; j++) {
        if (i === j) continue;
        const [x0, y0] = pointAt(sorted[j].angle, RIM);
        const [x1, y1] = pointAt(sorted[j].angle, bondEnd(sorted[j].side));
        if (segmentMeetsBox(x0, y0, x1, y1, placed[i].box, 1.5)) {
          touched = true;
          const tie = i > j ? 1 : -1;
          turn(i, NUDGE * (Math.sign(turnFrom(sorted[j].angle, placed[i].labelAngle)) || tie));
        }
      }
    }
    if (!touched) break;
  }
  return placed;
}

/** Shortest turn from one direction to another, degrees in (-180, 180]. */
function turnFrom(from: number, to: number): number {
  const turn = (((to - from) % 360) + 360) % 360;
  return turn > 180 ? turn - 360 : turn;
}

/** The drawing of a projection about its centre, as markup without the surrounding document. */
export function newmanDrawing(layout: NewmanLayout, theme: FigureTheme): string {
  const bonds = (side: 'front' | 'rear'): string[] =>
    layout.substituents
      .filter((one) => one.side === side)
      .sort((p, q) => Number(p.defining) - Number(q.defining))
      .flatMap((one) => bondLines(one, theme));
  return element(
    'g',
    {},
    ...bonds('rear'),
    element('circle', { r: RIM, fill: theme.background, stroke: theme.ink, 'stroke-width': 1.3 }),
    torsionWedge(layout.torsion, theme),
    ...bonds('front'),
    element('circle', { r: 1.9, fill: theme.ink }),
    ...layout.substituents.map((one) => labelMarkup(one, theme)),
    ...layout.onAxis.map(({ text, box }) =>
      element(
        'text',
        { x: 0, y: box.bottom - 0.25 * FONT_SIZE, 'font-size': 0.85 * FONT_SIZE, 'text-anchor': 'middle', fill: theme.quiet },
        escapeXml(text),
      ),
    ),
  );
}

/** Rear bonds are wide and pale, front bonds thin and dark: where one covers the other both are seen. */
function bondLines({ side, angle, order, defining }: NewmanSubstituent, theme: FigureTheme): string[] {
  const front = side === 'front';
  const stroke = defining ? theme.torsion : front ? theme.ink : theme.rear;
  const width = front ? (defining ? 2.2 : 1.5) : 4.2;
  const [x0, y0] = pointAt(angle, front ? 0 : RIM);
  const [x1, y1] = pointAt(angle, bondEnd(side));
  const [across, down] = pointAt(angle + 90, 1);
  const spacing = front ? 3 : 5;
  return Array.from({ length: order }, (_, n) => {
    const shift = (n - (order - 1) / 2) * spacing;
    return element('line', {
      x1: x0 + shift * across,
      y1: y0 + shift * down,
      x2: x1 + shift * across,
      y2: y1 + shift * down,
      stroke,
      'stroke-width': order > 1 ? 0.6 * width : width,
      'stroke-opacity': defining && !front ? '0.5' : undefined,
    });
  });
}

function torsionWedge(torsion: number, theme: FigureTheme): string {
  if (Math.abs(torsion) < SMALLEST_WEDGE) return '';
  const radius = 0.58 * RIM;
  const [x, y] = pointAt(torsion, radius);
  const arc = `A ${radius.toFixed(2)} ${radius.toFixed(2)} 0 0 ${torsion > 0 ? 1 : 0} ${x.toFixed(2)} ${y.toFixed(2)}`;
  return (
    element('path', { d: `M 0 0 L 0 ${(-radius).toFixed(2)} ${arc} Z`, fill: theme.torsion, 'fill-opacity': '0.14' }) +
    element('path', { d: `M 0 ${(-radius).toFixed(2)} ${arc}`, fill: 'none', stroke: theme.torsion, 'stroke-width': 0.9 })
  );
}

function labelMarkup({ label, leftwards, box, baseline, defining, side }: NewmanSubstituent, theme: FigureTheme): string {
  let lowered = 0;
  const spans = labelRuns(leftwards ? reversedLabel(label) : label).map(({ text, shift }) => {
    const level = shift === 'line' ? 0 : shift === 'subscript' ? 0.2 * FONT_SIZE : -0.38 * FONT_SIZE;
    const dy = level - lowered;
    lowered = level;
    const size = shift === 'line' ? undefined : FONT_SIZE * SCRIPT_SCALE;
    return element('tspan', { dy: dy === 0 ? undefined : dy, 'font-size': size }, escapeXml(text));
  });
  return element(
    'text',
    {
      x: leftwards ? box.right : box.left,
      y: baseline,
      'font-size': FONT_SIZE,
      'font-weight': defining ? 'bold' : undefined,
      'text-anchor': leftwards ? 'end' : 'start',
      fill: defining ? theme.torsion : side === 'front' ? theme.ink : theme.quiet,
    },
    ...spans,
  );
}

/**
 * A Newman projection as an SVG document of `size` by `size` px, drawn from the actual geometry, with the torsion angle written below.
 * Arguments and errors as for `newmanLayout`.
 */
export function newmanProjection(
  molecule: Molecule,
  torsion: readonly [number, number, number, number],
  coordinates: ArrayLike<number>,
  options: { readonly size?: number; readonly theme?: FigureTheme; readonly title?: string } = {},
): string {
  const { size = 200, theme = LIGHT_THEME } = options;
  const layout = newmanLayout(molecule, torsion, coordinates);
  const { left, right, top, bottom } = layout.bounds;
  const margin = 0.05 * size;
  const captionSize = Math.max(10, 0.065 * size);
  const room = size - 2 * margin - 1.6 * captionSize;
  const scale = Math.min((size - 2 * margin) / (right - left), room / (bottom - top), LARGEST_RIM * (size / RIM));
  const x = size / 2 - (scale * (left + right)) / 2;
  const y = margin + room / 2 - (scale * (top + bottom)) / 2;
  const atoms = torsion.join('–');
  return svgDocument(
    {
      width: size,
      height: size,
      title: options.title ?? `Newman projection${molecule.name ? ` of ${molecule.name}` : ''}`,
      description: `Seen from atom ${torsion[1]} to atom ${torsion[2]}. ${describeNewman(layout)}`,
      background: theme.background,
    },
    element(
      'g',
      { 'font-family': theme.fontFamily },
      element('g', { transform: `translate(${x.toFixed(2)} ${y.toFixed(2)}) scale(${scale.toFixed(4)})` }, newmanDrawing(layout, theme)),
      element(
        'text',
        { x: size / 2, y: size - margin, 'text-anchor': 'middle', 'font-size': captionSize, fill: theme.quiet },
        escapeXml(`φ(${atoms}) = ${degreesText(layout.torsion)}`),
      ),
    ),
  );
}

/** The projection in words, for readers who cannot see it. */
export function describeNewman({ substituents, torsion }: NewmanLayout): string {
  const list = (side: 'front' | 'rear'): string =>
    substituents
      .filter((one) => one.side === side)
      .map(({ label, angle }) => `${labelText(label)} at ${Math.round(angle) % 360}°`)
      .join(', ') || 'none';
  return `Torsion angle ${degreesText(torsion)}. Front substituents, clockwise from the top: ${list('front')}. Rear substituents: ${list('rear')}.`;
}
