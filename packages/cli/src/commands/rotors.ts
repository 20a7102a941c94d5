import type { Command } from 'commander';
import { addInputOptions, example, type Finish, type InputFlags } from './common.js';

export interface RotorsFlags extends InputFlags {
  json?: boolean;
}

export function describeRotors(program: Command, finish: Finish): void {
  addInputOptions(program.command('rotors'))
    .argument('<molecule>', 'SMILES, file or -')
    .description('list the bonds that turn: axis, defining torsion, kind, symmetry numbers, period')
    .option('--json', 'one JSON line a record on standard output')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial rotors "CC(=O)Nc1ccc(O)cc1"'))
    .action(async (molecule: string, flags: RotorsFlags) => finish(await (await import('../jobs/rotors.js')).listRotors(molecule, flags)));
}
