/** The common case in one call: a molecule and four atoms in, the document of a torsion profile out. */
import { type Mmff94, type Mmff94Options, mmff94, type TorsionSeries, torsionTermsOn } from '@tordial/forcefield';
import {
  type Coordinates,
  canonicalSmiles,
  fragmentsOf,
  type Molecule,
  moleculeFromSmiles,
  type Note,
  openStereo,
  perceiveStereo,
} from '@tordial/geometry';
import {
  type Abortable,
  checkTorsion,
  conformerSearch,
  type DocumentRotor,
  type EnergyUnit,
  findRotors,
  type ProfileDocument,
  profileDocument,
  type Rotor,
  rotorOfTorsion,
  rotorScan,
  type ScanProgress,
} from '@tordial/scan';
import { driveInTurns } from './drive-in-turns.js';
import { VERSION } from './version.js';

export interface TorsionProfileOptions {
  /** MMFF94s by default. */
  readonly forceField?: 'MMFF94' | 'MMFF94s';
  /** Constant, 1 by default. */
  readonly dielectric?: Mmff94Options['dielectric'];
  /** Torsion series in place of MMFF94 terms of this molecule, as `torsionOverridesFor` reads them from a fit document. */
  readonly torsionOverrides?: readonly TorsionSeries[];
  /** Degrees between the grid angles, a divisor of 360; 10. */
  readonly step?: number;
  /** An angle on the grid, degrees; -180. */
  readonly startAngle?: number;
  /**
   * First and last angle, degrees: only these are scanned, and the profile is open. A torsion inside a ring needs it; angles that would break the ring are
   * left out with a note.
   */
  readonly range?: readonly [number, number];
  /** Scan one period of a rotor with a symmetric side and copy it: a third of the work for a methyl, and approximate, as a note says. */
  readonly periodic?: boolean;
  /** Starting conformers to build; 8. May be 0 when `starts` are given. */
  readonly conformers?: number;
  /** Starting geometries of your own, angstrom; they come before the built ones. A rigid scan turns the first start alone. */
  readonly starts?: readonly Coordinates[];
  /** Seed of everything random; 1. */
  readonly seed?: number;
  /** Largest gradient component left at a point, kcal/mol/angstrom; 1e-3. */
  readonly tolerance?: number;
  /** Turn one side as it stands and relax nothing. */
  readonly rigid?: boolean;
  /** kcal/mol by default. */
  readonly unit?: EnergyUnit;
  readonly onProgress?: (progress: ScanProgress) => void;
  /** Stops the work with the signal's reason. */
  readonly signal?: Abortable;
  /** Notes to carry in the document, such as those that came with a record. */
  readonly notes?: readonly Note[];
}

/**
 * Scans the torsion about the bond between the second and third of four atoms, relaxed at each angle, to the lower envelope over several
 * starting conformers. `input` is a SMILES or a molecule.
 *
 * The event loop gets a turn every few milliseconds, so that progress can be shown and a signal can arrive.
 * Rejects with a `TordialError`: `smiles/...` for a SMILES that cannot be read, `torsion/...` for atoms that are no torsion that turns,
 * `mmff94/...` for a molecule that MMFF94 does not cover, `embed/failed`, `scan/...`.
 */
export async function torsionProfile(
  input: string | Molecule,
  atoms: readonly [number, number, number, number],
  options: TorsionProfileOptions = {},
): Promise<ProfileDocument> {
  const { conformers = 8, starts: given = [], seed = 1, unit = 'kcal/mol', rigid = false, notes = [], signal, range } = options;
  // atoms are counted as the input writes them, so a nameless molecule goes by its input and not by its canonical SMILES
  const molecule = typeof input === 'string' ? { ...moleculeFromSmiles(input), name: input } : input;
  const torsion = checkTorsion(molecule, atoms, { rings: range !== undefined });
  const rotor = rotorOfTorsion(molecule, torsion);
  const period = options.periodic && !rigid && rotor.periodicity < 360 ? rotor.periodicity : undefined;
  const potential = mmff94(molecule, {
    variant: options.forceField,
    dielectric: options.dielectric,
    torsionOverrides: options.torsionOverrides,
  });

  const wanted = rigid ? Math.max(0, 1 - given.length) : conformers;
  const built = wanted === 0 ? { starts: [], notes: openStereo(molecule) } : await build(molecule, potential, wanted, seed, signal);
  const starts = [...given, ...built.starts];
  // a stereocentre that the input leaves open is scanned as the starts have it: turning bonds cannot invert it
  const settled = { ...molecule, stereo: perceiveStereo(molecule, starts[0]) };
  const profile = await driveInTurns(
    rotorScan(settled, torsion, {
      starts,
      kind: rigid ? 'rigid' : 'relaxed',
      step: options.step,
      startAngle: options.startAngle,
      range,
      period,
      tolerance: options.tolerance,
      onProgress: options.onProgress,
      signal,
    }),
    potential,
    signal,
  );

  const fragments = fragmentsOf(molecule).count;
  return profileDocument(profile, {
    molecule: settled,
    smiles: canonicalSmiles(settled),
    fragments,
    kind: rotor.kind,
    serves: equivalentTorsions(molecule, rotor),
    parameters: torsionTermsOn(potential.parameters, torsion[1], torsion[2]),
    unit,
    settings: { conformers: starts.length, seed, dielectric: potential.dielectric },
    notes: [...notes, ...severalFragments(fragments), ...built.notes, ...notShortened(options.periodic === true, period)],
    provenance: { program: 'tordial', version: VERSION, potential: potential.label, ...carried(potential) },
  });
}

/** The rotor's torsion as it lies in each equivalent rotor. */
function equivalentTorsions(molecule: Molecule, rotor: Rotor): NonNullable<DocumentRotor['serves']> {
  const alike = findRotors(molecule).filter(({ equivalenceClass }) => equivalenceClass === rotor.equivalenceClass);
  const [a, b] = rotor.axis;
  const own = alike.find(({ axis }) => axis.includes(a) && axis.includes(b));
  if (!own) return [];
  // each relabelling leads from the first rotor of the class
  const back = new Int32Array(molecule.atomCount);
  own.relabelling.forEach((to, from) => {
    back[to] = from;
  });
  return alike
    .filter((other) => other !== own)
    .map(({ relabelling, mirrored }) => {
      const [i, j, k, l] = rotor.torsion.map((atom) => relabelling[back[atom]]);
      return { torsion: [i, j, k, l] as const, mirrored: mirrored !== own.mirrored };
    });
}

function notShortened(asked: boolean, period: number | undefined): Note[] {
  if (!asked || period !== undefined) return [];
  return [{ code: 'scan/no-period', message: 'neither side of the rotor is symmetric (or the scan is rigid): the full turn was scanned' }];
}

/** A document made with series carries them. */
function carried({ torsionOverrides }: Mmff94): { torsionSeries?: readonly TorsionSeries[] } {
  return torsionOverrides.length > 0 ? { torsionSeries: torsionOverrides } : {};
}

async function build(
  molecule: Molecule,
  potential: Mmff94,
  count: number,
  seed: number,
  signal: Abortable | undefined,
): Promise<{ starts: Coordinates[]; notes: readonly Note[] }> {
  const { conformers, notes } = await driveInTurns(conformerSearch(molecule, { count, seed, tolerance: ROUGH_START }), potential, signal);
  return { starts: conformers.map(({ coordinates }) => coordinates), notes };
}

/** A start is turned and relaxed again, so it need not be converged, kcal/mol/angstrom. */
const ROUGH_START = 0.1;

function severalFragments(count: number): Note[] {
  if (count === 1) return [];
  const message = `the input holds ${count} separate fragments; all of them were kept, and their mutual energy is part of the profile`;
  return [{ code: 'molecule/fragments', message }];
}
