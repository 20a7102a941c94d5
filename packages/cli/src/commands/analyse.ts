import { type Command, Option } from 'commander';
import { nonNegativeNumber, quantity, temperatures } from '../arguments.js';
import { example, type Finish } from './common.js';

export interface AnalyseFlags {
  temperature?: number[];
  shift?: number;
  field?: number;
  barrierError?: number;
  couplings?: boolean;
  hinderedTorsion?: boolean;
  hinderedRotor?: boolean;
  prove?: boolean;
  unit: 'kcal/mol' | 'kJ/mol';
  json?: boolean;
}

export function describeAnalyse(program: Command, finish: Finish): void {
  program
    .command('analyse')
    .argument('<profile>', 'a profile.json, or - for standard input')
    .description('rotamers, populations, barriers, rates, half-lives, hindered rotor and couplings of a profile, without scanning again')
    .addOption(
      new Option(
        '--temperature <K>',
        '298.15, a list 298.15,310.15 or a range 250:400:10; 25, 37, 40, 60 and 80 C when left out',
      ).argParser(temperatures),
    )
    .addOption(new Option('--shift <ppm>', 'shift difference of two signals, 0.35ppm: adds where they coalesce').argParser(quantity('ppm')))
    .addOption(new Option('--field <MHz>', 'spectrometer frequency of their nucleus, 400MHz').argParser(quantity('MHz')))
    .addOption(new Option('--barrier-error <kcal/mol>', 'assumed error of a barrier').argParser(nonNegativeNumber))
    .option('--couplings', 'insist on vicinal H-C-C-H couplings: an error where the axis has none')
    .option('--hindered-rotor', 'levels and thermodynamic functions of a heavy rotor too, which may take minutes')
    .option('--hindered-torsion', 'free energies with the hindered rotor in place of the torsional vibration of each well')
    .option('--prove', 'prove wells and saddles first, where the document does not hold them')
    .addOption(new Option('--unit <unit>', 'unit of energies').choices(['kcal/mol', 'kJ/mol']).default('kcal/mol'))
    .option('--json', 'print the result as JSON on standard output')
    .helpOption('--help', 'print this help')
    .addHelpText('after', example('tordial analyse anisole/profile.json --temperature 250:400:10'))
    .action(async (profile: string, flags: AnalyseFlags) => finish(await (await import('../jobs/analyse.js')).analyseFile(profile, flags)));
}
