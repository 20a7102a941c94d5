/**
 * Entry of the command. The files under commands/ describe the command line and load the work behind a command only
 * when it is asked for, so that help and version answer at once.
 */
import { Command, CommanderError } from 'commander';
import { describeAnalyse } from './commands/analyse.js';
import { describeBuild } from './commands/build.js';
import { describeEnergy } from './commands/energy.js';
import { describeFit } from './commands/fit.js';
import { describeProfile } from './commands/profile.js';
import { describeRotors } from './commands/rotors.js';
import { describeStrain } from './commands/strain.js';
import { exitCodeOf, report } from './failures.js';
import { VERSION } from './version.js';

/** Runs the command with the arguments that follow its name; resolves to the exit code: 0 all went well, 1 some records failed, 2 wrong usage. */
export async function main(args: readonly string[]): Promise<number> {
  let exitCode = 0;
  const finish = (code: number): void => {
    exitCode = code;
  };
  const program = new Command('tordial')
    .description('How the bonds of a molecule turn: torsion profiles from a SMILES or a molfile, with MMFF94 and MMFF94s.')
    .version(VERSION, '--version', 'print the version')
    .helpOption('--help', 'print this help')
    .helpCommand(false)
    .addHelpText(
      'after',
      `
MOLECULE is a SMILES, a .smi, .mol or .sdf file (.gz is taken), or - for standard input.
Atom indices count from 0 in the order of the input; added hydrogens come last.
Exit code: 0 all went well, 1 some records failed (the rest is done), 2 wrong usage.

Example:
  tordial profile "COc1ccccc1" --torsion 0,1,2,3 -o anisole

MMFF94 energies are estimates; decisions about safety, stability or release need experiment and the responsible specialist.`,
    );
  for (const describe of [describeRotors, describeEnergy, describeBuild, describeProfile, describeFit, describeAnalyse, describeStrain])
    describe(program, finish);
  for (const command of [program, ...program.commands]) command.exitOverride().showHelpAfterError('(--help lists the options)');

  process.stdout.on('error', (error: NodeJS.ErrnoException) => {
    // whoever read our output has gone, as `head` does: nothing is left to say
    if (error.code === 'EPIPE') process.exit(exitCode);
    throw error;
  });
  try {
    await program.parseAsync([...args], { from: 'user' });
    return exitCode;
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? 0 : 2;
    report(error);
    return exitCodeOf(error);
  }
}
