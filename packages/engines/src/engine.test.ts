import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createMolecule } from '@tordial/geometry';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openEngine } from './engine.js';
import { engineConfig } from './engine-config.js';
import { ANGSTROM_PER_BOHR, atomicInput, KCAL_PER_HARTREE } from './qcschema.js';

const hydrogen = createMolecule({ atomicNumbers: [1, 1], bonds: [[0, 1, 1]] });
const x = Float64Array.of(0, 0, 0, 0, 0, 0.8);

// an engine for the tests: a spring of 0.2 hartree/bohr^2 about 1.4 bohr, counting how often it is asked
const SPRING = `
const { appendFileSync } = require('node:fs');
let text = '';
process.stdin.on('data', (part) => (text += part)).on('end', () => {
  appendFileSync(process.argv[2], 'asked\\n');
  const { molecule, driver } = JSON.parse(text);
  const r = molecule.geometry[5] - molecule.geometry[2];
  const energy = 0.1 * (r - 1.4) ** 2;
  const slope = 0.2 * (r - 1.4);
  console.log('a line of its own');
  console.log(JSON.stringify({ schema_name: 'qcschema_output', success: true, driver, properties: { return_energy: energy },
    return_result: driver === 'energy' ? energy : [0, 0, -slope, 0, 0, slope] }));
});`;

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'tordial-engine-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const script = (source: string): string[] => {
  const path = join(folder, 'engine.cjs');
  writeFileSync(path, source);
  return [process.execPath, path, join(folder, 'asked.txt')];
};
const engine = (source: string, more: object = {}) =>
  openEngine(hydrogen, engineConfig({ command: script(source), method: 'spring', ...more }));
const asked = (): number => readFileSync(join(folder, 'asked.txt'), 'utf8').trim().split('\n').length;

describe('an engine', () => {
  it('converts bohr and hartree: the gradient is the slope of the energy', async () => {
    const spring = engine(SPRING);
    const { energy, gradient } = await spring.evaluate(x);
    const stretched = await spring.energy(Float64Array.of(0, 0, 0, 0, 0, 0.81));
    const compressed = await spring.energy(Float64Array.of(0, 0, 0, 0, 0, 0.79));
    expect(energy).toBeCloseTo(0.1 * (0.8 / ANGSTROM_PER_BOHR - 1.4) ** 2 * KCAL_PER_HARTREE, 6);
    expect(gradient?.[5]).toBeCloseTo((stretched - compressed) / 0.02, 4);
  });
  it('asks once for what its cache holds, also after a restart', async () => {
    const cache = join(folder, 'cache');
    const first = await engine(SPRING, { cache }).evaluate(x);
    const second = await engine(SPRING, { cache }).evaluate(x);
    expect(second).toEqual(first);
    expect(asked()).toBe(1);
    expect(readdirSync(cache)).toHaveLength(1);
  });
  it('tells the program apart from one that is not there', async () => {
    const missing = openEngine(hydrogen, engineConfig({ command: ['no-such-program-here'], method: 'spring' }));
    await expect(missing.evaluate(x)).rejects.toMatchObject({ code: 'engine/missing' });
  });
  it('carries the error text of an engine that fails, after asking again as often as told', async () => {
    const failing = `require('node:fs').appendFileSync(process.argv[2], 'asked\\n'); console.log(JSON.stringify({ success: false, error: { error_type: 'convergence_error', error_message: 'SCF did not settle' } }));`;
    await expect(engine(failing, { retries: 2 }).evaluate(x)).rejects.toMatchObject({
      code: 'engine/failed',
      message: expect.stringContaining('SCF did not settle'),
    });
    expect(asked()).toBe(3);
  });
  it('carries standard error of one that crashes', async () => {
    const crashing = `process.stderr.write('out of disk'); process.exit(3);`;
    await expect(engine(crashing, { retries: 0 }).evaluate(x)).rejects.toMatchObject({
      code: 'engine/failed',
      message: expect.stringContaining('out of disk'),
    });
  });
  it('refuses answers that are no numbers and keeps none of them', async () => {
    const cache = join(folder, 'cache');
    const broken = `console.log('{"success": true, "properties": {"return_energy": null}, "return_result": [0,0,0,0,0,0]}');`;
    await expect(engine(broken, { cache, retries: 0 }).evaluate(x)).rejects.toMatchObject({ code: 'engine/answer' });
    await expect(engine(`console.log('hello')`, { cache, retries: 0 }).evaluate(x)).rejects.toMatchObject({
      code: 'engine/answer',
      message: expect.stringContaining('hello'),
    });
    expect(readdirSync(folder)).not.toContain('cache');
  });
  it('ends a program that takes too long, and one whose work is called off', async () => {
    const slow = 'setInterval(() => undefined, 1000);';
    await expect(engine(slow, { timeout: 0.3, retries: 0 }).evaluate(x)).rejects.toMatchObject({ code: 'engine/timeout' });
    const controller = new AbortController();
    const running = openEngine(hydrogen, engineConfig({ command: script(slow), method: 'spring' }), controller.signal).evaluate(x);
    setTimeout(() => controller.abort(), 50);
    await expect(running).rejects.toMatchObject({ name: 'AbortError' });
  });
  it('runs no more requests at a time than it may', async () => {
    // each waits until two have started, then leaves a mark when it ends
    const watching = `
const { appendFileSync, readFileSync } = require('node:fs');
appendFileSync(process.argv[2], '+');
while (readFileSync(process.argv[2], 'utf8').split('+').length < 3);
console.log('{"success": true, "return_result": 0.5}');
appendFileSync(process.argv[2], '-');`;
    const spring = engine(watching, { concurrency: 2 });
    await Promise.all([0.7, 0.8, 0.9, 1.0, 1.1].map((z) => spring.energy(Float64Array.of(0, 0, 0, 0, 0, z))));
    let running = 0;
    let most = 0;
    for (const sign of readFileSync(join(folder, 'asked.txt'), 'utf8')) {
      running += sign === '+' ? 1 : -1;
      most = Math.max(most, running);
    }
    expect(most).toBe(2);
  });
});

describe('the configuration of an engine', () => {
  it.each([
    [[], 'JSON object'],
    [{ method: 'hf' }, '"command"'],
    [{ command: 'program -', method: 'hf' }, 'list of program'],
    [{ command: ['program'] }, '"method"'],
    [{ command: ['program'], method: 'hf', retry: 3 }, '"retry" is not known'],
    [{ command: ['program'], method: 'hf', timeout: 0 }, '"timeout"'],
    [{ command: ['program'], method: 'hf', concurrency: 1.5 }, '"concurrency"'],
  ])('refuses %j', (value, words) => {
    expect(() => engineConfig(value)).toThrow(words);
  });
});

// field names and units: MolSSI QCSchema, AtomicInput and Molecule, schema_version 1 and 2
it('asks in QCSchema: bohr, charge, multiplicity, fixed frame', () => {
  const input = atomicInput(hydrogen, x, { method: 'hf', basis: '6-31g' }, 'gradient');
  expect(input).toMatchObject({
    schema_name: 'qcschema_input',
    driver: 'gradient',
    model: { method: 'hf', basis: '6-31g' },
    molecule: { symbols: ['H', 'H'], molecular_charge: 0, molecular_multiplicity: 1, fix_com: true, fix_orientation: true },
  });
  expect(input.molecule.geometry[5]).toBeCloseTo(1.5117809, 6);
});
