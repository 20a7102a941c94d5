import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { engineConfig, openEngine } from '@tordial/engines';
import { mmff94 } from '@tordial/forcefield';
import { elementSymbol, moleculeFromSmiles } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { engineProfile } from './engine-profile.js';
import { profileAsReference, torsionFit } from './torsion-fit.js';
import { torsionProfile } from './torsion-profile.js';

const peroxide = moleculeFromSmiles('[H]OO[H]');
const ATOMS = [0, 1, 2, 3] as const;
const folder = mkdtempSync(join(tmpdir(), 'tordial-engine-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

let profile: ProfileDocument;
beforeAll(async () => {
  profile = await torsionProfile(peroxide, ATOMS, { step: 30, conformers: 1 });
});

const energyAt = ({ points }: ProfileDocument, angle: number): number => {
  const point = points.find((other) => Math.abs(other.angle - angle) < 1e-6);
  return point ? point.relativeEnergy : Number.NaN;
};

describe('a profile of a potential that answers later', () => {
  const own = mmff94(peroxide);
  let asked = 0;
  const config = engineConfig({ command: ['none'], method: 'mmff94s' });
  const engine = {
    atomCount: 4,
    energy: async (x: Float64Array) => own.evaluate(x),
    evaluate: async (x: Float64Array) => {
      asked++;
      const gradient = new Float64Array(12);
      return { energy: own.evaluate(x, gradient), gradient };
    },
  };

  it('is that of the force field when the engine is the force field, relaxed or at its geometries', async () => {
    for (const singlePoints of [true, false]) {
      const document = await engineProfile(profile, engine, config, { singlePoints });
      document.points.forEach((point, n) => {
        expect(Math.abs(point.energy - profile.points[n].energy)).toBeLessThan(1e-4);
        expect(Math.abs(point.torque - profile.points[n].torque)).toBeLessThan(singlePoints ? 0.4 : 0.02);
      });
      expect(document.stationaryPoints.map(({ kind }) => kind)).toEqual(profile.stationaryPoints.map(({ kind }) => kind));
      document.stationaryPoints.forEach(({ relativeEnergy }, n) => {
        expect(Math.abs(relativeEnergy - profile.stationaryPoints[n].relativeEnergy)).toBeLessThan(0.02);
      });
      expect(document.provenance).toMatchObject({ potential: 'mmff94s', geometries: 'MMFF94s' });
    }
    expect(asked).toBeLessThan(12 * 20);
  });

  it('is refused when an energy is no number', async () => {
    const broken = { ...engine, energy: async () => Number.NaN };
    await expect(engineProfile(profile, broken, config, { singlePoints: true })).rejects.toMatchObject({ code: 'scan/energy' });
  });
});

const COMMAND = ['qcengine', 'run', 'psi4', '-'];
const installed = ['psi4', 'qcengine'].every(
  (program) => spawnSync(program, ['--version'], { stdio: 'ignore', cwd: tmpdir() }).status === 0,
);
if (!installed)
  process.stderr.write(
    'engine tests are skipped: psi4 and qcengine are not installed (Debian: apt-get install -y psi4 python3-qcengine)\n',
  );

// Hartree-Fock in a basis with polarisation on hydrogen: smaller ones lose the trans barrier
describe.skipIf(!installed)('hydrogen peroxide at HF/6-31G(d,p) with a real engine', () => {
  const config = engineConfig({ command: COMMAND, method: 'hf', basis: '6-31g(d,p)', concurrency: 2, cache: join(folder, 'cache') });
  let points: ProfileDocument;
  beforeAll(async () => {
    points = await engineProfile(profile, openEngine(peroxide, config), config, { singlePoints: true });
  }, 180_000);

  /** Energy in hartree of the program run directly on a geometry, without QCSchema. */
  const direct = (coordinates: readonly number[]): number => {
    const rows = Array.from(peroxide.atomicNumbers, (z, i) => `${elementSymbol(z)} ${coordinates.slice(3 * i, 3 * i + 3).join(' ')}`);
    const input = join(folder, 'direct.dat');
    const output = join(folder, 'direct.out');
    writeFileSync(
      input,
      `molecule {\n0 1\n${rows.join('\n')}\nsymmetry c1\nno_com\nno_reorient\n}\nset basis 6-31g(d,p)\nE = energy('hf')\nprint_out("DIRECT %.10f\\n" % E)\n`,
    );
    spawnSync('psi4', ['-i', input, '-o', output, '-n', '1'], { cwd: folder });
    return Number(/DIRECT (-?[\d.]+)/.exec(spawnSync('cat', [output], { encoding: 'utf8' }).stdout)?.[1]);
  };

  it('has its cis barrier far above its trans barrier, both as the program run directly has them', () => {
    const [cis, trans, gauche] = [0, -180, 120].map((angle) => energyAt(points, angle));
    expect(cis).toBeGreaterThan(trans + 5);
    expect(trans).toBeGreaterThan(gauche);
    const at = (angle: number) => points.points.find((point) => point.angle === angle)?.coordinates ?? [];
    const [directCis, directTrans] = [0, -180].map((angle) => direct(at(angle)));
    expect(Math.abs((directCis - directTrans) * 627.5094740631 - (cis - trans))).toBeLessThan(1e-3);
  }, 60_000);

  it('relaxes at held angles to where the program itself does', async () => {
    // a gradient of 0.5 leaves less than 1e-3 kcal/mol in bonds this stiff, and saves half of the requests
    const settings = { ...profile.settings, tolerance: 0.5 };
    const two = { ...profile, settings, points: profile.points.filter(({ angle }) => angle === 0 || angle === -180) };
    const relaxed = await engineProfile(two, openEngine(peroxide, config), config);
    expect(relaxed.points.every(({ converged }) => converged)).toBe(true);
    // Debian's psi4 1.3.2, its own optimiser within C2h and C2v, gau_tight: hartree
    const [trans, cis] = relaxed.points.map(({ energy }) => energy / 627.5094740631);
    expect(Math.abs(trans - -150.7753825102)).toBeLessThan(2e-6);
    expect(Math.abs(cis - -150.7630654831)).toBeLessThan(2e-6);
    for (const { torque } of relaxed.points) expect(Math.abs(torque)).toBeLessThan(0.05);
  }, 180_000);

  it('is followed by MMFF94s with a fitted series', () => {
    const { quality, series, sets } = torsionFit([{ profile, reference: profileAsReference(points, profile) }], {
      order: 3,
      geometries: 'given',
    });
    expect(quality.rmsdAfter).toBeLessThan(0.1 * quality.rmsdBefore);
    expect(series[0].terms.every(({ standardError }) => standardError !== null && standardError < 0.1)).toBe(true);
    expect(sets[0].after.meanBarrierError).toBeLessThan(0.05);
  });
});
