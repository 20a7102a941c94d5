import { fileURLToPath } from 'node:url';
import { createContext, runInContext } from 'node:vm';
import { rolldown } from 'rolldown';
import { expect, it } from 'vitest';
import { torsionProfile } from './torsion-profile.js';

it('bundles for a browser and gives there what it gives here', async () => {
  const bundle = await rolldown({
    input: fileURLToPath(new URL('./index.ts', import.meta.url)),
    platform: 'browser',
    resolve: { conditionNames: ['tordial-source', 'import', 'default'], extensionAlias: { '.js': ['.ts', '.js'] } },
    onLog: (level, log) => {
      if (level === 'warn' && log.code === 'UNRESOLVED_IMPORT') throw new Error(log.message);
    },
  });
  const { output } = await bundle.generate({ format: 'iife', name: 'tordial' });
  expect(output[0].code).not.toMatch(/\brequire\(|from ?["']node:/);

  // what a browser has of what the library uses, and nothing of Node
  const realm = createContext({ setTimeout, performance, atob, console });
  runInContext(output[0].code, realm);
  const there = await runInContext(
    `tordial.torsionProfile('OO', [2, 0, 1, 3], { step: 60 }).then((profile) => JSON.stringify(profile))`,
    realm,
  );
  expect(there).toBe(JSON.stringify(await torsionProfile('OO', [2, 0, 1, 3], { step: 60 })));
});
