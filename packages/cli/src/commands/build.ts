import { type Command, Option } from 'commander';
import { positiveInteger } from '../arguments.js';
import { addCommonOptions, type CommonFlags, example, type Finish } from './common.js';

export interface BuildFlags extends CommonFlags {
  output: string;
  conformers: number;
  relax: boolean;
}

export function describeBuild(program: Command, finish: Finish): void {
  addCommonOptions(program.command('build'))
    .argument('<molecule>', 'SMILES, file or -')
    .description('3D coordinates, relaxed, with hydrogens')
    .requiredOption('-o, --output <file>', 'file to write, .sdf or .xyz')
    .addOption(new Option('--conformers <n>', 'different conformers a molecule, lowest first').argParser(positiveInteger).default(1))
    .option('--no-relax', 'leave the coordinates as embedded')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial build "OC(=O)[C@H](C)c1ccccc1" --conformers 10 -o acid.sdf'))
    .action(async (molecule: string, flags: BuildFlags) =>
      finish(await (await import('../jobs/build.js')).buildStructures(molecule, flags)),
    );
}
