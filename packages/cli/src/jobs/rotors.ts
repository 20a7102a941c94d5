/** `tordial rotors`: the bonds that turn. */
import { canonicalSmiles, openStereo } from '@tordial/geometry';
import { findRotors } from '@tordial/scan';
import type { RotorsFlags } from '../commands/rotors.js';
import { eachRecord, tell } from './each-record.js';
import { table } from './table.js';

export function listRotors(argument: string, flags: RotorsFlags): Promise<number> {
  return eachRecord(argument, flags, (record, { index, label }) => {
    const { molecule } = record;
    const rotors = findRotors(molecule);
    tell([...record.notes, ...openStereo(molecule)], label);
    if (flags.json) {
      const line = {
        name: molecule.name,
        index,
        smiles: canonicalSmiles(molecule),
        atoms: molecule.atomCount,
        rotors: rotors.map(({ axis, torsion, kind, symmetryNumbers, periodicity, equivalenceClass, sides }) => ({
          axis,
          torsion,
          kind,
          symmetryNumbers,
          periodicity,
          equivalenceClass,
          sides: sides.map((side) => Array.from(side)),
        })),
      };
      process.stdout.write(`${JSON.stringify(line)}\n`);
      return;
    }
    const heading = `${label}: ${rotors.length === 0 ? 'no bond that turns' : `${rotors.length} rotor${rotors.length === 1 ? '' : 's'}`}\n`;
    const rows = rotors.map(({ axis, torsion, kind, symmetryNumbers, periodicity, equivalenceClass }) => [
      axis.join('-'),
      torsion.join(','),
      kind,
      symmetryNumbers.join(' x '),
      `${periodicity}`,
      `${equivalenceClass}`,
    ]);
    const columns = ['axis', 'torsion', 'kind', 'symmetry', 'period (deg)', 'equivalent set'];
    process.stdout.write(`${heading}${rows.length === 0 ? '' : table(columns, rows)}`);
  });
}
