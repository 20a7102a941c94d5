import { embed, moleculeFromSmiles, radians, sidesOfBond, torsion, turnAbout, wrapDegrees } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { boxesOverlap } from './boxes.js';
import { labelText } from './group-label.js';
import { describeNewman, newmanLayout, newmanProjection } from './newman.js';
import { FONTS_INSTALLED, pixels } from './pixels.fixture.js';

type Atoms = [number, number, number, number];

function turned(smiles: string, atoms: Atoms, angle: number) {
  const molecule = moleculeFromSmiles(smiles);
  const x = embed(molecule);
  const sides = sidesOfBond(molecule, atoms[1], atoms[2]);
  if (!sides) throw new Error('the axis lies in a ring');
  turnAbout(x, atoms[1], atoms[2], sides.b, radians(angle) - torsion(x, ...atoms));
  return { molecule, x };
}

const MOLECULES: [string, Atoms][] = [
  ['CCCC', [0, 1, 2, 3]],
  ['COc1ccccc1', [0, 1, 2, 3]],
  ['Cc1ccccc1-c1ccccc1F', [1, 6, 7, 12]],
  ['CC(C)(C)C(C)(C)C', [0, 1, 4, 5]],
  ['COc1ccccc1-c1ccccc1C(=O)O', [2, 7, 8, 13]],
  ['NC(=O)C(C#N)c1ccccc1', [0, 1, 3, 6]],
  ['FC(F)(F)S(=O)(=O)C', [0, 1, 4, 7]],
  ['CC(C)Oc1ccc(F)cc1C(=O)NCc1ccncc1', [11, 13, 14, 15]],
];

describe('newmanLayout', () => {
  it('draws the torsion clockwise from the front for a positive angle, and at its true size', () => {
    for (const angle of [-150, -60, -1, 0, 33.3, 90, 179.5]) {
      const { molecule, x } = turned('CCCC', [0, 1, 2, 3], angle);
      const layout = newmanLayout(molecule, [0, 1, 2, 3], x);
      expect(layout.torsion).toBeCloseTo(angle, 6);
      const front = layout.substituents.find(({ side, defining }) => side === 'front' && defining);
      const rear = layout.substituents.find(({ side, defining }) => side === 'rear' && defining);
      expect(front).toMatchObject({ atom: 0, angle: 0 });
      expect(rear?.atom).toBe(3);
      expect(wrapDegrees(rear?.angle ?? Number.NaN)).toBeCloseTo(angle, 6);
    }
  });

  it('puts every other substituent at the angle that the torsions about the axis give', () => {
    for (const [smiles, atoms] of MOLECULES) {
      const { molecule, x } = turned(smiles, atoms, 40);
      const [i, j, k] = atoms;
      const { substituents } = newmanLayout(molecule, atoms, x);
      // seen from the front, the torsion i-j-k-l of a rear atom l is its clockwise angle; a front atom m has the torsion difference to a rear one
      const rear = substituents.filter(({ side }) => side === 'rear');
      for (const { atom, angle } of rear) expect(wrapDegrees(angle - (torsion(x, i, j, k, atom) * 180) / Math.PI)).toBeCloseTo(0, 6);
      for (const { atom, angle } of substituents.filter(({ side }) => side === 'front'))
        expect(wrapDegrees(angle + (torsion(x, atom, j, k, rear[0].atom) * 180) / Math.PI - rear[0].angle)).toBeCloseTo(0, 6);
    }
  });

  it('keeps labels apart at every angle, with the bonds in their true directions', () => {
    for (const [smiles, atoms] of MOLECULES)
      for (let angle = -180; angle < 180; angle += 15) {
        const { molecule, x } = turned(smiles, atoms, angle);
        const { substituents } = newmanLayout(molecule, atoms, x);
        const boxes = substituents.map(({ box }) => box);
        for (let p = 0; p < boxes.length; p++)
          for (let q = 0; q < p; q++) expect(boxesOverlap(boxes[p], boxes[q]), `${smiles} at ${angle}`).toBe(false);
        for (const one of substituents) expect(Math.abs(wrapDegrees(one.labelAngle - one.angle))).toBeLessThanOrEqual(55);
      }
  });

  it('handles a side with one substituent, a planar side and double bonds', () => {
    const anisole = turned('COc1ccccc1', [0, 1, 2, 3], 0);
    const layout = newmanLayout(anisole.molecule, [0, 1, 2, 3], anisole.x);
    expect(layout.substituents.filter(({ side }) => side === 'front').map(({ label }) => labelText(label))).toEqual(['CH3']);
    const rear = layout.substituents.filter(({ side }) => side === 'rear');
    expect(rear.map(({ label, order }) => [labelText(label), order])).toEqual([
      ['CH', 1],
      ['CH', 1],
    ]);
    expect(Math.abs(wrapDegrees(rear[0].angle - rear[1].angle))).toBeGreaterThan(170);

    const acid = turned('CC(=O)O', [4, 0, 1, 3], 60);
    const orders = newmanLayout(acid.molecule, [4, 0, 1, 3], acid.x).substituents.map(({ label, order }) => [labelText(label), order]);
    expect(orders).toContainEqual(['O', 2]);
    expect(orders).toContainEqual(['OH', 1]);
  });

  it('writes a group that lies on the axis beside the projection', () => {
    const molecule = moleculeFromSmiles('CC(O)C#N');
    const x = Array.from(embed(molecule));
    // axis C1-C3, whose far end bears nothing but the nitrogen: a torsion over it has no angle
    expect(() => newmanLayout(molecule, [0, 1, 3, 4], x)).toThrow(expect.objectContaining({ code: 'figure/newman' }));

    // an invented geometry: water-like front atom with a third substituent straight ahead of the axis
    const bent = moleculeFromSmiles('NN(F)O');
    const flat = new Float64Array(3 * bent.atomCount);
    const place = (atom: number, a: number, b: number, c: number): void => flat.set([a, b, c], 3 * atom);
    place(1, 0, 0, 0);
    place(0, 0, 0, 1.4);
    place(2, 0, 0.01, -1.4);
    place(3, 1.3, 0, -0.3);
    place(4, 0.9, 0, 1.8);
    place(5, -0.5, 0.8, 1.8);
    const hydroxyl = Array.from({ length: bent.atomCount }, (_, n) => n).slice(6);
    for (const atom of hydroxyl) place(atom, 1.6, 0.8, -0.3);
    const layout = newmanLayout(bent, [3, 1, 0, 4], flat);
    expect(layout.onAxis.map(({ text }) => text)).toEqual(['front: F']);
    expect(layout.substituents.some(({ atom }) => atom === 2)).toBe(false);
  });

  it('refuses atoms that are no chain and coordinates of another molecule', () => {
    const { molecule, x } = turned('CCCC', [0, 1, 2, 3], 60);
    expect(() => newmanLayout(molecule, [0, 1, 3, 2], x)).toThrow(expect.objectContaining({ code: 'figure/newman' }));
    expect(() => newmanLayout(molecule, [0, 1, 2, 3], x.slice(3))).toThrow(expect.objectContaining({ code: 'figure/newman' }));
  });
});

describe('newmanProjection', () => {
  it('is a well-formed, reproducible picture with its text in it', () => {
    const { molecule, x } = turned('CCCC', [0, 1, 2, 3], -65);
    const svg = newmanProjection(molecule, [0, 1, 2, 3], x, { size: 160, title: 'a < b & c' });
    expect(svg).toBe(newmanProjection(molecule, [0, 1, 2, 3], x, { size: 160, title: 'a < b & c' }));
    expect(svg).toContain('<title>a &lt; b &amp; c</title>');
    expect(svg).toContain('φ(0–1–2–3) = −65.0°');
    expect(pixels(svg, true).equals(pixels(svg, false))).toBe(!FONTS_INSTALLED);
  });

  it('says in words what it shows', () => {
    const { molecule, x } = turned('CCCC', [0, 1, 2, 3], 60);
    const words = describeNewman(newmanLayout(molecule, [0, 1, 2, 3], x));
    expect(words).toMatch(
      /^Torsion angle 60\.0°\. Front substituents, clockwise from the top: CH3 at 0°, H at 1\d\d°, H at 2\d\d°\. Rear substituents: CH3 at 60°/,
    );
  });
});
