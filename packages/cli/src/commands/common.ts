import { type Command, Option } from 'commander';
import { dielectric, nonNegativeInteger, positiveInteger } from '../arguments.js';

/** Tells the entry which exit code the work ended with. */
export type Finish = (exitCode: number) => void;

/** Options that say how records are taken, shared by every command that reads molecules. */
export interface InputFlags {
  largestFragment?: boolean;
  maxAtoms: number;
  maxRings: number;
  maxRecord: number;
}

export function addInputOptions(command: Command): Command {
  return command
    .option('--largest-fragment', 'keep only the largest organic fragment of each record')
    .addOption(new Option('--max-atoms <n>', 'largest record that is taken, atoms with hydrogens').argParser(positiveInteger).default(1000))
    .addOption(new Option('--max-rings <n>', 'most rings of a record that is taken').argParser(positiveInteger).default(200))
    .addOption(new Option('--max-record <n>', 'longest record that is taken, characters').argParser(positiveInteger).default(2_000_000));
}

/** Options that choose the potential, shared by every command that computes an energy. */
export interface PotentialFlags {
  forceField: 'mmff94' | 'mmff94s';
  dielectric?: { model: 'constant' | 'distance'; constant: number };
  torsions?: string;
}

export interface CommonFlags extends PotentialFlags, InputFlags {
  seed: number;
  unit: 'kcal/mol' | 'kJ/mol';
  json?: boolean;
}

export function addPotentialOptions(command: Command): Command {
  return command
    .addOption(new Option('--force-field <name>', 'force field').choices(['mmff94s', 'mmff94']).default('mmff94s'))
    .addOption(
      new Option('--dielectric <model:constant>', 'constant:C or distance:C')
        .argParser(dielectric)
        .default({ model: 'constant', constant: 1 }, 'constant:1'),
    )
    .option('--torsions <file>', 'fit.json whose torsion series stand in place of the terms they were fitted to');
}

export function addCommonOptions(command: Command): Command {
  return addInputOptions(addPotentialOptions(command))
    .addOption(new Option('--seed <n>', 'seed of everything random').argParser(nonNegativeInteger).default(1))
    .addOption(new Option('--unit <unit>', 'unit of energies').choices(['kcal/mol', 'kJ/mol']).default('kcal/mol'))
    .option('--json', 'print the result as JSON on standard output, all else on standard error');
}

/** The tail of a help page: one line to try. */
export function example(line: string, remark = ''): string {
  return `\nExample:\n  ${line}${remark === '' ? '' : `\n\n${remark}`}`;
}
