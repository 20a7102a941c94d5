import { elementSymbol, embed, moleculeFromSmiles, radians, sidesOfBond, torsion, turnAbout } from '@tordial/geometry';
import { PROFILE_SCHEMA, type ProfileDocument, type ProfilePoint, type ProfileStationaryPoint } from '@tordial/scan';

/** Energy V(phi) = sum over n of a_n cos(n phi) + b_n sin(n phi), kcal/mol: invented numbers, of the size of real profiles. */
export interface Series {
  readonly cosine: readonly number[];
  readonly sine?: readonly number[];
}

/**
 * A profile whose energies are those of a known series and whose geometries are an embedded molecule turned rigidly about the axis, so that every
 * angle, slope and extremum is known exactly. Its values mean nothing chemically.
 */
export function seriesProfile(
  smiles: string,
  atoms: readonly [number, number, number, number],
  series: Series,
  name = smiles,
  step = 10,
): ProfileDocument {
  const molecule = moleculeFromSmiles(smiles);
  const start = embed(molecule);
  const [i, j, k, l] = atoms;
  const sides = sidesOfBond(molecule, j, k);
  if (!sides) throw new Error('the axis lies in a ring');
  const geometry = (angle: number): number[] => {
    const x = Float64Array.from(start);
    turnAbout(x, j, k, sides.b, radians(angle) - torsion(x, i, j, k, l));
    return Array.from(x);
  };
  const extrema = stationaryAngles(series);
  const lowest = Math.min(...extrema.map((angle) => energy(series, angle)));
  const points = Array.from({ length: 360 / step }, (_, n): ProfilePoint => {
    const angle = -180 + n * step;
    return {
      angle,
      energy: energy(series, angle),
      relativeEnergy: energy(series, angle) - lowest,
      torque: slope(series, angle),
      converged: true,
      residual: 0,
      breakAfter: false,
      beyond: null,
      before: null,
      coordinates: geometry(angle),
    };
  });
  const stationaryPoints = extrema.map((angle): ProfileStationaryPoint => {
    const curved = slope(series, angle + 0.01) > slope(series, angle - 0.01);
    return {
      kind: curved ? 'well' : 'barrier',
      angle,
      energy: energy(series, angle),
      relativeEnergy: energy(series, angle) - lowest,
      torque: 0,
      converged: true,
      coordinates: geometry(angle),
    };
  });
  return {
    schema: PROFILE_SCHEMA,
    molecule: {
      name,
      smiles,
      elements: Array.from(molecule.atomicNumbers, elementSymbol),
      formalCharges: Array.from(molecule.formalCharges),
      bonds: Array.from(molecule.bonds.a, (a, n) => [a, molecule.bonds.b[n], molecule.bonds.order[n]] as const),
      fragments: 1,
    },
    rotor: { torsion: atoms, axis: [j, k], kind: 'single bond', sides: [Array.from(sides.a), Array.from(sides.b)], parameters: [] },
    unit: 'kcal/mol',
    points,
    stationaryPoints,
    settings: { kind: 'relaxed', step, startAngle: -180, conformers: 1, seed: 1, tolerance: 1e-3 },
    notes: [],
    provenance: { program: 'tordial', version: '0.0.0', potential: 'cosine series' },
  };
}

function energy({ cosine, sine = [] }: Series, angle: number): number {
  const phi = radians(angle);
  return (
    cosine.reduce((sum, a, n) => sum + a * Math.cos((n + 1) * phi), 0) + sine.reduce((sum, b, n) => sum + b * Math.sin((n + 1) * phi), 0)
  );
}

function slope({ cosine, sine = [] }: Series, angle: number): number {
  const phi = radians(angle);
  return (
    cosine.reduce((sum, a, n) => sum - a * (n + 1) * Math.sin((n + 1) * phi), 0) +
    sine.reduce((sum, b, n) => sum + b * (n + 1) * Math.cos((n + 1) * phi), 0)
  );
}

/** Where the slope changes sign, ascending in [-180, 180), by bisection. */
function stationaryAngles(series: Series): number[] {
  const angles: number[] = [];
  for (let n = 0; n < 720; n++) {
    let from = -180.125 + n / 2;
    let to = from + 0.5;
    const sign = Math.sign(slope(series, from));
    if (sign === Math.sign(slope(series, to))) continue;
    for (let round = 0; round < 50; round++) {
      const middle = (from + to) / 2;
      if (Math.sign(slope(series, middle)) === sign) from = middle;
      else to = middle;
    }
    const angle = Math.round(from * 1e6) / 1e6;
    angles.push(angle < -180 ? angle + 360 : angle);
  }
  return angles.sort((p, q) => p - q);
}
