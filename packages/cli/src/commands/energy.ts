import type { Command } from 'commander';
import { addCommonOptions, type CommonFlags, example, type Finish } from './common.js';

export interface EnergyFlags extends CommonFlags {
  relax?: boolean;
  atomTypes?: boolean;
}

export function describeEnergy(program: Command, finish: Finish): void {
  addCommonOptions(program.command('energy'))
    .argument('<molecule>', 'SMILES, file or -')
    .description('energy and its seven terms, a line a record; records without 3D coordinates are built and relaxed first')
    .option('--relax', 'relax given coordinates before the energy is taken')
    .option('--atom-types', 'add the MMFF94 type and partial charge of each atom')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial energy molecules.sdf --force-field mmff94 --json'))
    .action(async (molecule: string, flags: EnergyFlags) =>
      finish(await (await import('../jobs/energy.js')).listEnergies(molecule, flags)),
    );
}
