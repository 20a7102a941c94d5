/**
 * Reads many more mutated SMILES and molfiles than `npm test` does: FACTOR times 20,000 and 5,000, from a seed of the caller's choice. Every
 * failure must be a TordialError with a code, no reading may take 5 s, and what is accepted must come back from its canonical SMILES.
 * A night's run: `node benchmarks/robustness.mjs 100 $(date +%j)`. A failing text and its seed are printed by the test.
 *
 *   node benchmarks/robustness.mjs [FACTOR] [SEED]
 */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const [factor = '10', seed = '1'] = process.argv.slice(2);
const root = fileURLToPath(new URL('..', import.meta.url));
const vitest = fileURLToPath(new URL('../node_modules/vitest/vitest.mjs', import.meta.url));
const { status } = spawnSync(
  process.execPath,
  [vitest, 'run', '--testTimeout=86400000', '--reporter=verbose', 'packages/geometry/src/robustness.test.ts'],
  { cwd: root, stdio: 'inherit', env: { ...process.env, TORDIAL_MUTANTS: factor, TORDIAL_SEED: seed } },
);
process.exitCode = status ?? 1;
