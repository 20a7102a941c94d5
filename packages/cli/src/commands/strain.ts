import { type Command, Option } from 'commander';
import { gridStep, nonNegativeInteger } from '../arguments.js';
import { addCommonOptions, type CommonFlags, example, type Finish } from './common.js';

export interface StrainFlags extends CommonFlags {
  step: number;
  conformers: number;
  geometry?: string;
}

export function describeStrain(program: Command, finish: Finish): void {
  addCommonOptions(program.command('strain'))
    .argument('<molecule>', 'SDF or molfile with 3D coordinates, or a SMILES with --geometry')
    .description('torsional strain of a given geometry: what each rotor costs above the lowest well of its own profile')
    .addOption(new Option('--step <degrees>', 'distance of the grid angles of the profiles').argParser(gridStep).default(15))
    .addOption(new Option('--conformers <n>', 'starting conformers of the profiles').argParser(nonNegativeInteger).default(8))
    .option('--geometry <file>', 'the geometry (.xyz, atoms in the order of MOLECULE)')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial strain docked.sdf'))
    .action(async (molecule: string, flags: StrainFlags) => finish(await (await import('../jobs/strain.js')).listStrains(molecule, flags)));
}
