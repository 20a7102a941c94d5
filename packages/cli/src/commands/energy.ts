import type { Command } from 'commander';
import { addCommonOptions, type CommonFlags, example, type Finish } from './common.js';

export interface EnergyFlags extends CommonFlags {
  relax?: boolean;
  atomTypes?: boolean;
  geometry?: string;
}

export function describeEnergy(program: Command, finish: Finish): void {
  addCommonOptions(program.command('energy'))
    .argument('<molecule>', 'SMILES, file or -')
    .description('energy and its seven terms, a line a record; records without 3D coordinates are built and relaxed first')
    .option('--relax', 'relax given coordinates before the energy is taken')
    .option('--geometry <file>', 'take the coordinates from these frames, a line each (.xyz or .xyz.gz, atoms in the order of MOLECULE)')
    .option('--atom-types', 'add the MMFF94 type and partial charge of each atom')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial energy "CCCC" --geometry frames.xyz --json'))
    .action(async (molecule: string, flags: EnergyFlags) =>
      finish(await (await import('../jobs/energy.js')).listEnergies(molecule, flags)),
    );
}
