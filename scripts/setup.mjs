/**
 * Everything a fresh machine with Node 20 and npm lacks: packages through a pinned pnpm, then the TypeScript build.
 * Both steps are skipped when nothing they depend on has changed. Whatever they print goes to standard error.
 */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

export const PNPM = 'pnpm@12.23.0';

export const root = fileURLToPath(new URL('..', import.meta.url));
const stamps = join(root, '.tordial');

/** Runs a program with its standard output turned to ours of errors, and ends this process when it fails. */
function run(program, args) {
  // npm run -s sets a log level that would silence a nested npm's errors too
  const { npm_config_loglevel: _silent, ...env } = process.env;
  const result = spawnSync(program, args, { cwd: root, env, stdio: ['ignore', 2, 2], shell: process.platform === 'win32' });
  if (result.status !== 0) {
    process.stderr.write(`set-up failed: ${program} ${args.join(' ')}${result.error ? `: ${result.error.message}` : ''}\n`);
    process.exit(2);
  }
}

function* sources(folder) {
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    if (entry.name === 'node_modules' || entry.name === 'dist' || entry.name === 'fixtures') continue;
    const path = join(folder, entry.name);
    if (entry.isDirectory()) yield* sources(path);
    else yield path;
  }
}

const packages = () => readdirSync(join(root, 'packages')).map((name) => join(root, 'packages', name));

function digest(paths, describe) {
  const hash = createHash('sha256');
  for (const path of paths) hash.update(`${path}\0${describe(path)}\0`);
  return hash.digest('hex');
}

/** Runs `step` unless its stamp already carries `key` and `product` exists. */
function unlessDone(name, key, product, step) {
  const stamp = join(stamps, name);
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === key && existsSync(product)) return;
  step();
  mkdirSync(stamps, { recursive: true });
  writeFileSync(stamp, key);
}

export function install() {
  const manifests = [root, ...packages(), join(root, 'benchmarks')].map((folder) => join(folder, 'package.json')).filter(existsSync);
  const key = digest([join(root, 'pnpm-lock.yaml'), join(root, 'pnpm-workspace.yaml'), ...manifests], (path) => readFileSync(path, 'utf8'));
  unlessDone('installed', key, join(root, 'node_modules'), () =>
    run('npx', ['--yes', PNPM, 'install', '--frozen-lockfile', '--prefer-offline', '--reporter', 'append-only']),
  );
}

/** The vector loop of the force field, from its own source; the product is committed, so that tests run without a build. */
function buildKernel() {
  const folder = join(root, 'packages/forcefield');
  const inputs = [join(folder, 'assembly/non-bonded.ts'), join(folder, 'scripts/compile-kernel.mjs')];
  const key = digest(inputs, (path) => readFileSync(path, 'utf8'));
  unlessDone('kernel', key, join(folder, 'src/kernel/non-bonded.generated.ts'), () => run(process.execPath, inputs.slice(1)));
}

export function build() {
  buildKernel();
  const inputs = packages()
    .flatMap((folder) => [...sources(folder)])
    .filter((path) => !path.endsWith('.test.ts'));
  inputs.push(join(root, 'tsconfig.base.json'), join(root, 'tsconfig.json'));
  const key = digest(inputs.sort(), (path) => {
    const { mtimeMs, size } = statSync(path);
    return `${mtimeMs} ${size}`;
  });
  unlessDone('built', key, join(root, 'packages/cli/dist/main.js'), () =>
    run(process.execPath, [join(root, 'node_modules/typescript/bin/tsc'), '-b']),
  );
}
