import { type Command, Option } from 'commander';
import { angleRange, atomQuadruple, axisPair, finiteNumber, gridStep, nonNegativeInteger, positiveNumber } from '../arguments.js';
import { addCommonOptions, type CommonFlags, example, type Finish } from './common.js';

export interface ProfileFlags extends CommonFlags {
  torsion?: [number, number, number, number];
  rotor?: [number, number];
  all?: boolean;
  full?: boolean;
  periodic?: boolean;
  range?: [number, number];
  rigid?: boolean;
  step: number;
  startAngle: number;
  conformers: number;
  tolerance: number;
  geometry?: string;
  engine?: string;
  singlePoints?: boolean;
  output?: string;
  prove: boolean;
}

export function describeProfile(program: Command, finish: Finish): void {
  addCommonOptions(program.command('profile'))
    .argument('<molecule>', 'SMILES, file or -')
    .description('energy against the angle of a rotor, relaxed at each angle')
    .addOption(
      new Option('--torsion <A,B,C,D>', 'four bonded atoms; the bond B-C turns').argParser(atomQuadruple).conflicts(['rotor', 'all']),
    )
    .addOption(new Option('--rotor <B-C>', 'the bond that turns; its torsion is chosen').argParser(axisPair).conflicts(['torsion', 'all']))
    .addOption(new Option('--all', 'every rotor, one of each equivalent set').conflicts(['torsion', 'rotor']))
    .addOption(new Option('--full', 'cover the full turn (the default)').conflicts(['range', 'periodic']))
    .addOption(new Option('--periodic', 'scan one period of a symmetric rotor and copy it (approximate)').conflicts(['range', 'rigid']))
    .addOption(
      new Option('--range <FROM:TO>', 'scan these angles only, such as -60:60, the rest is left out; a torsion inside a ring needs it')
        .argParser(angleRange)
        .conflicts(['rotor', 'all', 'engine']),
    )
    .option('--rigid', 'turn one side as it stands and relax nothing')
    .addOption(new Option('--step <degrees>', 'distance of the grid angles, a divisor of 360').argParser(gridStep).default(10))
    .addOption(new Option('--start-angle <degrees>', 'an angle that lies on the grid').argParser(finiteNumber).default(-180))
    .addOption(new Option('--conformers <n>', 'starting conformers to build').argParser(nonNegativeInteger).default(8))
    .addOption(
      new Option('--tolerance <value>', 'largest gradient component left at a point, kcal/mol/angstrom')
        .argParser(positiveNumber)
        .default(1e-3),
    )
    .option('--geometry <file>', 'start from these structures too (.xyz or .xyz.gz, atoms in the order of MOLECULE)')
    .option('--no-prove', 'leave wells and saddles as the scan gives them: rates over crossings of branches are then refused')
    .option('--engine <config>', 'go over the profile with the engine of this JSON file, relaxed again at each angle')
    .option('--single-points', 'with --engine: its energies at the geometries of the force field')
    .option('-o, --output <folder>', 'write profile.json, profile.csv, profile.svg, frames.xyz and frames.sdf there')
    .helpOption('--help', 'print this help')
    .addHelpText(
      'after',
      example(
        'tordial profile "COc1ccccc1" --torsion 0,1,2,3 -o anisole',
        'With --all, or for a file of several records, each profile gets a folder of its own below the one named.',
      ),
    )
    .action(async (molecule: string, flags: ProfileFlags) =>
      finish(await (await import('../jobs/profile.js')).scanProfiles(molecule, flags)),
    );
}
