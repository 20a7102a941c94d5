import { readFileSync } from 'node:fs';
import type { ProfileDocument } from '@tordial/scan';
import { expect, it } from 'vitest';
import { z } from 'zod';
import { profileSchema, readProfile } from './profile-reader.js';

const point = (angle: number) => ({
  angle,
  energy: 1,
  relativeEnergy: 0,
  torque: 0,
  converged: true,
  residual: 1e-4,
  breakAfter: false,
  beyond: null,
  before: null,
  coordinates: new Array(12).fill(0),
});
const document: ProfileDocument = {
  schema: 'tordial/profile/1',
  molecule: {
    name: 'peroxide',
    smiles: 'OO',
    elements: ['O', 'O', 'H', 'H'],
    formalCharges: [0, 0, 0, 0],
    bonds: [
      [0, 1, 1],
      [0, 2, 1],
      [1, 3, 1],
    ],
    fragments: 1,
  },
  rotor: {
    torsion: [2, 0, 1, 3],
    axis: [0, 1],
    kind: 'heteroatom-heteroatom',
    sides: [
      [0, 2],
      [1, 3],
    ],
    parameters: [],
  },
  unit: 'kcal/mol',
  points: [-180, -60, 60].map(point),
  stationaryPoints: [],
  settings: { kind: 'relaxed', step: 120, startAngle: -180, conformers: 1, seed: 1, tolerance: 1e-3 },
  notes: [{ code: 'molecule/fragments', message: 'told', place: { atom: 1 } }],
  provenance: { program: 'tordial', version: '0.1.0', potential: 'MMFF94s' },
};

it('reads back what it wrote, from text and from a value', () => {
  expect(readProfile(JSON.stringify(document))).toEqual(document);
  expect(readProfile(document)).toEqual(document);
});

it.each([
  ['no JSON', '{"schema":', 'document/json'],
  ['another document', { schema: 'tordial/fit/1' }, 'document/schema'],
  ['a newer version', { ...document, schema: 'tordial/profile/2' }, 'document/version'],
  ['a missing field', { ...document, unit: undefined }, 'document/field'],
  ['an angle out of range', { ...document, points: [point(180), point(0), point(60)] }, 'document/field'],
  ['coordinates of other atoms', { ...document, points: document.points.map((p) => ({ ...p, coordinates: [0] })) }, 'document/field'],
  ['a torsion of atoms that are not there', { ...document, rotor: { ...document.rotor, torsion: [2, 0, 1, 9] } }, 'document/field'],
])('refuses %s', (_, value, code) => {
  expect(() => readProfile(value)).toThrow(expect.objectContaining({ code }));
});

it('is described by docs/schemas/profile-1.json', () => {
  const written = JSON.parse(readFileSync(new URL('../../../docs/schemas/profile-1.json', import.meta.url), 'utf8'));
  expect(written).toEqual(z.toJSONSchema(profileSchema));
});
