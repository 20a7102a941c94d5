/** Profile documents made in the test: a rigid two-centre molecule X-A-B-Y with a given potential. */
import { radians } from '@tordial/geometry';
import { PROFILE_SCHEMA, type ProfileDocument, type ProfilePoint, type ProfileStationaryPoint } from '@tordial/scan';
import { extremaOfSeries, type PeriodicSeries, seriesValue } from './hindered-rotor/periodic-series.js';

export interface RigidMolecule {
  readonly smiles: string;
  readonly kind: string;
  /** The two centres, then the atoms on the first and on the second one; `places` in degrees about the axis, the first of each defines phi. */
  readonly centres: readonly [string, string];
  readonly ends: readonly [readonly (readonly [string, number])[], readonly (readonly [string, number])[]];
}

export const DICHLOROETHANE: RigidMolecule = {
  smiles: 'ClCCCl',
  kind: 'sp3-sp3',
  centres: ['C', 'C'],
  ends: [
    [['Cl', 0], ['H', 120], ['H', 240]],
    [['Cl', 0], ['H', 120], ['H', 240]],
  ], // biome-ignore format: a row an end
};

export const PEROXIDE: RigidMolecule = { smiles: 'OO', kind: 'heteroatom-heteroatom', centres: ['O', 'O'], ends: [[['H', 0]], [['H', 0]]] };

export const METHANOL: RigidMolecule = {
  smiles: 'CO',
  kind: 'terminal methyl',
  centres: ['C', 'O'],
  ends: [[['H', 0], ['H', 120], ['H', 240]], [['H', 0]]], // biome-ignore format: a row an end
};

/** Geometry at phi degrees: bonds to ends 1.09 (H) or 1.78 angstrom, bent off the axis by 110 degrees. */
export function geometryAt({ centres, ends }: RigidMolecule, phi: number): number[] {
  const length = centres[0] === 'O' ? 1.46 : 1.52;
  const x = [0, 0, 0, 0, 0, length];
  ends.forEach((end, side) => {
    for (const [element, place] of end) {
      const r = element === 'H' ? (centres[side] === 'O' ? 0.97 : 1.09) : 1.78;
      const out = r * Math.sin(radians(110));
      const along = r * Math.cos(radians(110));
      const angle = radians(place + (side === 1 ? phi : 0));
      x.push(out * Math.cos(angle), out * Math.sin(angle), side === 0 ? along : length - along);
    }
  });
  return x;
}

/** The document of a scan of `potential` (kcal/mol) with a step in degrees. */
export function profileDocument(
  molecule: RigidMolecule,
  potential: PeriodicSeries,
  changes: Partial<ProfileDocument> = {},
  step = 10,
): ProfileDocument {
  const { centres, ends } = molecule;
  const first = ends[0].length;
  const extrema = extremaOfSeries(potential);
  const lowest = Math.min(...extrema.map((extremum) => extremum.value));
  const elements = [...centres, ...ends[0].map(([element]) => element), ...ends[1].map(([element]) => element)];
  const sides = [
    [0, ...ends[0].map((_, n) => 2 + n)],
    [1, ...ends[1].map((_, n) => 2 + first + n)],
  ] as const;
  const points = Array.from({ length: 360 / step }, (_, n): ProfilePoint => {
    const angle = -180 + n * step;
    const energy = seriesValue(potential, radians(angle));
    return {
      angle,
      energy: energy + 17,
      relativeEnergy: energy - lowest,
      torque: seriesValue(potential, radians(angle), 1),
      converged: true,
      residual: 1e-4,
      breakAfter: false,
      beyond: null,
      before: null,
      coordinates: geometryAt(molecule, angle),
    };
  });
  const stationaryPoints = extrema.map((extremum): ProfileStationaryPoint => {
    const angle = (extremum.angle * 180) / Math.PI;
    return {
      kind: extremum.kind === 'minimum' ? 'well' : 'barrier',
      angle,
      energy: extremum.value + 17,
      relativeEnergy: extremum.value - lowest,
      torque: 0,
      converged: true,
      coordinates: geometryAt(molecule, angle),
    };
  });
  return {
    schema: PROFILE_SCHEMA,
    molecule: {
      name: '',
      smiles: molecule.smiles,
      elements,
      formalCharges: elements.map(() => 0),
      bonds: [[0, 1, 1], ...sides.flatMap((side) => side.slice(1).map((atom) => [side[0], atom, 1] as [number, number, number]))],
      fragments: 1,
    },
    rotor: { torsion: [2, 0, 1, 2 + first], axis: [0, 1], kind: molecule.kind, sides, parameters: [] },
    unit: 'kcal/mol',
    points,
    stationaryPoints,
    settings: { kind: 'rigid', step, startAngle: -180, conformers: 1, seed: 1, tolerance: 1e-3 },
    notes: [],
    provenance: { program: 'tordial', version: '0', potential: 'a series' },
    ...changes,
  };
}
