/**
 * The figures of docs/guides/command.md, as the command draws them, into docs/figures. Needs the build.
 *
 *   node benchmarks/gallery.mjs
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { writeFigure } from './report/page.mjs';

const GALLERY = [
  ['anisole', 'COc1ccccc1', '0,1,2,3'],
  ['butane', 'CCCC', '0,1,2,3'],
  ['biaryl', 'COc1ccccc1-c1ccccc1C', '2,7,8,13'],
  // of our own invention, 40 atoms
  ['benzamide', 'COc1cc(O)c(cc1F)C(=O)NCCN1CCOCC1', '12,13,14,15'],
];

const command = fileURLToPath(new URL('../packages/cli/bin/tordial.mjs', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'gallery-'));
try {
  for (const [name, smiles, torsion] of GALLERY) {
    const begin = performance.now();
    const args = [command, 'profile', smiles, '--torsion', torsion, '-o', join(folder, name)];
    const { status, stderr } = spawnSync(process.execPath, args, { encoding: 'utf8' });
    if (status !== 0) throw new Error(stderr);
    writeFigure(`profile-${name}.svg`, readFileSync(join(folder, name, 'profile.svg'), 'utf8').trimEnd());
    process.stdout.write(`${name}: ${((performance.now() - begin) / 1000).toFixed(1)} s\n${stderr.replace(/written to .*\n/, '')}`);
  }
} finally {
  rmSync(folder, { recursive: true });
}
