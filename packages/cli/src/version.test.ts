import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { VERSION } from './version.js';

it('is the version of the manifest', () => {
  expect(VERSION).toBe(JSON.parse(readFileSync(new URL('../package.json', import.meta.url), 'utf8')).version);
});
