/**
 * What a consumer gets: packs every package, checks the packages' manifests, installs them into an empty project, compiles a program
 * against their declarations under both module resolutions, and runs it.
 */
import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { build, install, PNPM, root } from './setup.mjs';

const PROGRAM = `
import { conformers, type Coordinates, findRotors, mmff94, moleculeFromSmiles, type Potential, scanRotor, torsionProfile, TordialError } from 'tordial';
import { engineConfig } from '@tordial/engines';

const molecule = moleculeFromSmiles('CCO');
const potential: Potential = mmff94(molecule);
const starts: Coordinates[] = conformers(molecule, potential, { count: 2 }).conformers.map(({ coordinates }) => coordinates);
const [rotor] = findRotors(molecule);
const { points } = scanRotor(molecule, potential, rotor.torsion, { starts, step: 60 });
const profile = await torsionProfile('CCO', [0, 1, 2, 8], { step: 60 });
if (points.length !== 6 || profile.points.length !== 6) throw new Error('a scan is incomplete');
try {
  engineConfig({});
} catch (error) {
  if (!(error instanceof TordialError)) throw error;
  console.log(error.code, profile.schema);
}
`;

function run(program, args, cwd) {
  const result = spawnSync(program, args, { cwd, encoding: 'utf8' });
  if (result.status === 0) return result.stdout;
  process.stderr.write(`${program} ${args.join(' ')}\n${result.stdout}${result.stderr}`);
  return process.exit(1);
}

install();
build();
const folder = mkdtempSync(join(tmpdir(), 'tordial-consumer-'));
try {
  const packages = readdirSync(join(root, 'packages'));
  for (const name of packages) run('npx', ['--yes', PNPM, 'pack', '--pack-destination', folder], join(root, 'packages', name));
  const tarballs = readdirSync(folder).filter((name) => name.endsWith('.tgz'));
  for (const name of tarballs)
    run(process.execPath, [join(root, 'node_modules/publint/src/cli.js'), 'run', join(folder, name), '--strict'], folder);
  for (const name of tarballs)
    run(
      process.execPath,
      [join(root, 'node_modules/@arethetypeswrong/cli/dist/index.js'), join(folder, name), '--profile', 'esm-only'],
      folder,
    );

  const consumer = join(folder, 'consumer');
  mkdirSync(consumer);
  writeFileSync(join(consumer, 'package.json'), JSON.stringify({ name: 'consumer', private: true, type: 'module' }));
  // one install of all tarballs, so that the packages find each other
  run('npm', ['install', '--no-audit', '--no-fund', '--silent', ...tarballs.map((name) => join(folder, name))], consumer);
  writeFileSync(join(consumer, 'program.ts'), PROGRAM);
  const tsc = join(root, 'node_modules/typescript/bin/tsc');
  const settings = { strict: true, target: 'es2022', lib: ['es2022', 'dom'], types: [] };
  const compile = (name, resolution) => {
    writeFileSync(join(consumer, name), JSON.stringify({ compilerOptions: { ...settings, ...resolution }, files: ['program.ts'] }));
    run(process.execPath, [tsc, '-p', name], consumer);
  };
  compile('tsconfig.bundler.json', { module: 'esnext', moduleResolution: 'bundler', noEmit: true });
  compile('tsconfig.nodenext.json', { module: 'nodenext', moduleResolution: 'nodenext' });
  process.stdout.write(`consumer: ${run(process.execPath, ['program.js'], consumer)}`);
} finally {
  rmSync(folder, { recursive: true, force: true });
}
