/** `npm run tordial | test | lint | build`: set-up first, then the job with the arguments that follow. */
import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { build, install, root } from './setup.mjs';

const [job, ...rest] = process.argv.slice(2);
const node = (script, ...args) => spawnSync(process.execPath, [join(root, script), ...args], { cwd: root, stdio: 'inherit' }).status ?? 1;

install();
switch (job) {
  case 'tordial':
    build();
    // npm moved to the root; paths on the command line are meant from where the user stood
    process.chdir(process.env.INIT_CWD ?? process.cwd());
    process.argv.splice(1, process.argv.length, join(root, 'packages/cli/bin/tordial.mjs'), ...rest);
    await import('../packages/cli/bin/tordial.mjs');
    break;
  case 'test':
    build();
    process.exitCode = node('node_modules/vitest/vitest.mjs', 'run', ...rest);
    break;
  case 'lint':
    process.exitCode =
      node('node_modules/@biomejs/biome/bin/biome', 'check', ...rest) ||
      node('node_modules/typescript/bin/tsc', '-p', 'tsconfig.tests.json');
    break;
  case 'build':
    build();
    break;
  default:
    process.stderr.write('usage: npm run tordial | lint | build, or npm test\n');
    process.exitCode = 2;
}
