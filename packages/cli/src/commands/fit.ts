import { type Command, InvalidArgumentError, Option } from 'commander';
import { positiveInteger } from '../arguments.js';
import { example, type Finish } from './common.js';

export interface FitFlags {
  reference: string[];
  referenceUnit?: 'kcal/mol' | 'kJ/mol' | 'hartree' | 'eV';
  engine?: string;
  order: number | { from: number; to: number };
  phases: 'fixed' | 'free';
  weights: { kind: 'uniform' } | { kind: 'given' } | { kind: 'boltzmann'; temperature: number };
  restraint: { kind: 'none' | 'ridge' | 'lasso'; strength: number };
  toward: 'zero' | 'existing';
  geometries?: 'given' | 'relaxed';
  terms: 'rotor' | 'type' | 'axis';
  folds: number | 'leave-one-out';
  forceField?: 'mmff94' | 'mmff94s';
  unit: 'kcal/mol' | 'kJ/mol';
  output?: string;
  json?: boolean;
}

export function describeFit(program: Command, finish: Finish): void {
  program
    .command('fit')
    .argument('<profiles...>', 'profile.json of one molecule, or of several that share the torsion')
    .description('torsion terms fitted to a better reference curve, or a series that describes the profile itself')
    .addOption(
      new Option('--reference <file>', 'reference: table (.csv), profile.json or frames with energies (.xyz); once for each profile')
        .argParser((path: string, before: string[]) => [...before, path])
        .default([], 'none'),
    )
    .addOption(
      new Option('--reference-unit <unit>', 'unit of energies where the file states none').choices(['kcal/mol', 'kJ/mol', 'hartree', 'eV']),
    )
    .addOption(new Option('--engine <config>', 'reference energies by an engine at the geometries of the profile').conflicts('reference'))
    .addOption(
      new Option('--order <n or range>', 'highest periodicity; a range is decided by cross-validation')
        .argParser(orders)
        .default({ from: 1, to: 6 }, '1-6'),
    )
    .addOption(new Option('--phases <kind>', 'fixed: 0 and 180 degrees').choices(['fixed', 'free']).default('fixed'))
    .addOption(
      new Option('--weights <kind>', 'uniform, boltzmann:500K, or given in the table')
        .argParser(weights)
        .default({ kind: 'uniform' }, 'uniform'),
    )
    .addOption(
      new Option('--restraint <kind:strength>', 'ridge:0.1 or lasso:0.1')
        .argParser(restraint)
        .default({ kind: 'none', strength: 0 }, 'none'),
    )
    .addOption(
      new Option('--toward <terms>', 'where restraints and undetermined terms go').choices(['existing', 'zero']).default('existing'),
    )
    .addOption(
      new Option('--geometries <kind>', 'those relaxed in the fitted field, or those given (default with --engine)').choices([
        'relaxed',
        'given',
      ]),
    )
    .addOption(
      new Option(
        '--terms <which>',
        "torsions that are fitted: of the rotor's bond and the driven type, of that type anywhere, all on the bond",
      )
        .choices(['rotor', 'type', 'axis'])
        .default('rotor'),
    )
    .addOption(new Option('--folds <n>', 'folds of the cross-validation').argParser(positiveInteger).default('leave-one-out'))
    .addOption(
      new Option('--force-field <name>', 'force field whose terms are fitted, where the profile is of another potential').choices([
        'mmff94s',
        'mmff94',
      ]),
    )
    .addOption(new Option('--unit <unit>', 'unit of energies').choices(['kcal/mol', 'kJ/mol']).default('kcal/mol'))
    .option('--json', 'print the document on standard output')
    .option('-o, --output <folder>', 'write fit.json, terms.csv, points.csv and fit.svg there')
    .helpOption('--help', 'print this help')
    .addHelpText(
      'after',
      example(
        'tordial fit ether/profile.json --reference better.csv --order 1-6 -o ether-fit',
        'tordial profile ... --torsions ether-fit/fit.json uses the terms.',
      ),
    )
    .action(async (profiles: string[], flags: FitFlags) => finish(await (await import('../jobs/fit.js')).fitTorsions(profiles, flags)));
}

function orders(text: string): FitFlags['order'] {
  const match = /^([0-6])(?:-([0-6]))?$/.exec(text.trim());
  if (!match || (match[2] !== undefined && Number(match[2]) < Number(match[1])))
    throw new InvalidArgumentError('an order from 1 to 6 or a range such as 1-6 is meant.');
  return match[2] === undefined ? Number(match[1]) : { from: Number(match[1]), to: Number(match[2]) };
}

function weights(text: string): FitFlags['weights'] {
  if (text === 'uniform' || text === 'given') return { kind: text };
  const temperature = Number(/^boltzmann:([\d.]+)\s*K?$/i.exec(text)?.[1]);
  if (!(temperature > 0)) throw new InvalidArgumentError('uniform, given, or boltzmann:500K and the like are meant.');
  return { kind: 'boltzmann', temperature };
}

function restraint(text: string): FitFlags['restraint'] {
  const [kind, strength] = text.split(':');
  if (kind === 'none') return { kind, strength: 0 };
  if ((kind !== 'ridge' && kind !== 'lasso') || !(Number(strength) > 0))
    throw new InvalidArgumentError('ridge:0.1 or lasso:0.1 and the like are meant.');
  return { kind, strength: Number(strength) };
}
