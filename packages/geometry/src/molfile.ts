/** Molecules from molfiles. */
import { assemble } from './assemble.js';
import { configurationOf } from './configuration.js';
import type { ErrorPlace, Note } from './errors.js';
import { placeHydrogens } from './hydrogen-positions.js';
import { checkLimit, type Limits, withDefaults } from './limits.js';
import { type Coordinates, createMolecule, type Molecule, type StereoTable } from './molecule.js';
import { type MolfileAtom, parseMolfile, type WrittenMolfile } from './molfile-syntax.js';
import { completeStereo, possibleStereo } from './stereo.js';
import { drawnStereo } from './wedges.js';

/** One structure of an input and what came with it. */
export interface MolecularRecord {
  readonly molecule: Molecule;
  /** Angstrom, 3 per atom; null unless the input has three-dimensional coordinates for the whole structure. */
  readonly coordinates: Coordinates | null;
  /** Data fields of an SDF record in their order. */
  readonly properties: ReadonlyMap<string, string>;
  readonly notes: readonly Note[];
  /** Record number (from 1) and first line within a file of many records. */
  readonly place: ErrorPlace;
}

/**
 * Reads one molfile, V2000 or V3000; data fields behind it are kept as properties.
 *
 * Three-dimensional coordinates are kept and decide the configuration; a flat drawing gives configuration by its wedges and the shape of
 * its double bonds, and no coordinates. Hydrogens that the file leaves out come last and, in three dimensions, at standard positions, with
 * a note. Throws `molfile/syntax` with the `line`, `molfile/unsupported`, `molecule/...`, `limit/...`.
 */
export function readMolfile(text: string, limits?: Partial<Limits>): MolecularRecord {
  const bounds = withDefaults(limits);
  checkLimit('recordLength', text.length, bounds);
  return readRecord(text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/), bounds);
}

/** Reads the lines of one record; `place` is handed on. */
export function readRecord(lines: readonly string[], limits: Limits, place: ErrorPlace = {}): MolecularRecord {
  const written = parseMolfile(lines, limits, place.line);
  const { parts } = assemble(written.atoms, written.bonds, limits);
  const molecule = createMolecule({ ...parts, name: written.name });
  const properties = dataFields(lines.slice(written.lineCount));
  if (!isThreeDimensional(written)) {
    const stated = { ...molecule, stereo: drawnStereo(possibleStereo(molecule), written) };
    const stereo = completeStereo(stated);
    return { molecule: { ...molecule, stereo }, coordinates: null, properties, notes: unreadWedges(stereo, written), place };
  }
  const notes: Note[] = [];
  const coordinates = new Float64Array(3 * molecule.atomCount);
  for (const [i, { x, y, z }] of written.atoms.entries()) coordinates.set([x, y, z], 3 * i);
  const added = molecule.atomCount - written.atoms.length;
  if (added > 0) {
    placeHydrogens(molecule, coordinates, written.atoms.length);
    notes.push({
      code: 'molfile/hydrogens-added',
      message: `${added} hydrogens that the file leaves out were added at standard positions`,
    });
  }
  return { molecule: { ...molecule, stereo: configurationOf(molecule, coordinates) }, coordinates, properties, notes, place };
}

/** Notes on stereocentres that have a wedge and are open all the same. */
function unreadWedges({ tetrahedral }: StereoTable, { bonds }: WrittenMolfile): Note[] {
  const lifted = new Set(bonds.filter(({ wedge }) => wedge === 'up' || wedge === 'down').map(({ a }) => a));
  return tetrahedral
    .filter(({ atom, sign }) => sign === 0 && lifted.has(atom))
    .map(({ atom }) => ({
      code: 'molfile/wedge',
      message: `the wedges at atom ${atom} contradict one another or can be read both ways; the stereocentre counts as not specified`,
      place: { atom },
    }));
}

/** A depth beyond rounding shows three dimensions; a flat file has them only when its header says so and the atoms do not coincide. */
function isThreeDimensional({ atoms, dimension }: WrittenMolfile): boolean {
  const spread = (of: (atom: MolfileAtom) => number) => Math.max(...atoms.map(of)) - Math.min(...atoms.map(of));
  if (spread((atom) => atom.z) > 1e-3) return true;
  return dimension === '3D' && (atoms.length === 1 || spread((atom) => atom.x) + spread((atom) => atom.y) > 1e-3);
}

/** Data fields `> <NAME>`, each up to its blank line. */
function dataFields(lines: readonly string[]): Map<string, string> {
  const fields = new Map<string, string>();
  for (let n = 0; n < lines.length; n++) {
    const name = /^>.*?<([^>]*)>/.exec(lines[n])?.[1];
    if (name === undefined) continue;
    const value: string[] = [];
    while (n + 1 < lines.length && lines[n + 1].trim() !== '' && !/^\$\$\$\$/.test(lines[n + 1])) value.push(lines[++n]);
    fields.set(name, value.join('\n'));
  }
  return fields;
}
