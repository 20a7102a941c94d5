import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { moleculeFromSmiles, readXyz, torsion, writeSdf } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { scratchFolder, tordial } from './command.fixture.js';
import { readProfile } from './profile-reader.js';

const folder = scratchFolder();
const at = (name: string): string => join(folder, name);

describe.concurrent('wrong requests end with exit code 2, say what is wrong, and leave standard output empty', () => {
  writeFileSync(at('a-file'), '');
  it.each([
    ['an unknown command', ['spin', 'CCCC'], /unknown command 'spin'/],
    ['a missing file', ['profile', 'missing.sdf', '--all', '-o', at('x')], /there is no file missing\.sdf/],
    ['an XYZ file as molecule', ['rotors', at('frames.xyz')], /there is no file/],
    ['three atoms', ['profile', 'CCCC', '--torsion', '0,1,2', '-o', at('x')], /four different atom indices/],
    ['no rotor named', ['profile', 'CCCC', '-o', at('x')], /--torsion A,B,C,D/],
    ['no place for the result', ['profile', 'CCCC', '--torsion', '0,1,2,3'], /-o FOLDER/],
    ['atoms that are no chain', ['profile', 'CCCC', '--torsion', '0,2,1,3', '-o', at('x')], /atoms 0 and 2 are not bonded/],
    ['a torsion in a ring', ['profile', 'C1CCCCC1', '--torsion', '0,1,2,3', '-o', at('x')], /part of a ring/],
    ['an index out of range', ['profile', 'CCCC', '--torsion', '0,1,2,77', '-o', at('x')], /there is no atom 77.*0 to 13/],
    ['a torsion through a triple bond', ['profile', 'CC#CC', '--torsion', '0,1,2,3', '-o', at('x')], /linear/],
    ['a molecule without rotors', ['profile', 'c1ccccc1', '--all', '-o', at('x')], /no bond that turns/],
    ['a step that does not close', ['profile', 'CCCC', '--rotor', '1-2', '--step', '7', '-o', at('x')], /divisor of 360/],
    ['two ways to name the rotor', ['profile', 'CCCC', '--rotor', '1-2', '--all', '-o', at('x')], /cannot be used with/],
    ['an output folder below a file', ['profile', 'CCCC', '--rotor', '1-2', '-o', at('a-file/x')], /cannot be written to/],
    ['an unknown force field', ['energy', 'CCCC', '--force-field', 'own'], /mmff94s, mmff94/],
    ['a negative dielectric constant', ['energy', 'CCCC', '--dielectric', 'constant:-1'], /above 0/],
    ['a format that is not written', ['build', 'CCCC', '-o', at('x.pdf')], /\.sdf nor in \.xyz/],
    ['an empty input', ['rotors', '-'], /no record/],
  ])('%s', async (_, args, words) => {
    const { exitCode, stdout, stderr } = await tordial(args);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(2);
    expect(stdout).toBe('');
  });
});

describe.concurrent('records that cannot be done end with exit code 1', () => {
  it.each([
    ['a syntax error, its position shown', 'CC(C', /character 3/],
    ['boron', 'CCB(O)O', /atom 2 \(B\)/],
    ['a metal bound covalently', 'CC[Zn]CC', /atom 2 \(Zn\)/],
    ['a radical', 'CC[CH2]', /atom 2/],
    ['an allene whose configuration the force field does not hold', 'CC(Cl)=[C@]=C(C)Br', /lost its configuration/],
  ])('%s', async (_, smiles, words) => {
    const { exitCode, stderr } = await tordial(['energy', smiles]);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(1);
  });

  it('does the others when one record of an SDF is broken, and says which', async () => {
    const ethane = moleculeFromSmiles('CC');
    const record = writeSdf([{ molecule: ethane, coordinates: Float64Array.from({ length: 24 }, (_, n) => (n * 7) % 5), name: 'ethane' }]);
    const broken = record.replace(/ {2}8 {2}7/, '  8  x');
    writeFileSync(at('three.sdf'), record + broken + record.replaceAll('\n', '\r\n'));
    writeFileSync(at('three.sdf.gz'), gzipSync(readFileSync(at('three.sdf'))));
    for (const file of ['three.sdf', 'three.sdf.gz']) {
      const { exitCode, stdout, stderr } = await tordial(['energy', at(file), '--json']);
      const lines = stdout
        .trim()
        .split('\n')
        .map((line) => JSON.parse(line));
      expect(exitCode).toBe(1);
      expect(stderr).toMatch(/: record 2 \(line \d+\): (?!record)/);
      expect(lines.map(({ index }) => index)).toEqual([0, 1, 2]);
      expect(lines[0].energy).toBe(lines[2].energy);
      expect(lines[1]).toHaveProperty('error.code');
      expect(lines[1]).not.toHaveProperty('energy');
    }
  });
});

describe.concurrent('tordial energy', () => {
  it('prints one line a record with its terms, which add up', async () => {
    const { exitCode, stdout } = await tordial(['energy', '-', '--force-field', 'mmff94', '--json'], {
      input: 'CCO first\n\nOCCO second\n',
    });
    const lines = stdout
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(exitCode).toBe(0);
    expect(lines.map(({ name }) => name)).toEqual(['first', 'second']);
    for (const line of lines) {
      expect(Object.keys(line.terms)).toEqual([
        'bondStretching',
        'angleBending',
        'stretchBend',
        'outOfPlane',
        'torsion',
        'vanDerWaals',
        'electrostatic',
      ]);
      const sum = Object.values<number>(line.terms).reduce((p, q) => p + q, 0);
      expect(sum).toBeCloseTo(line.energy, 5);
      expect(line.unit).toBe('kcal/mol');
    }
  });
  it('keeps the largest organic fragment when asked to, and says so', async () => {
    const [whole, part] = await Promise.all(
      [[], ['--largest-fragment']].map((flags) => tordial(['energy', '[Na+].CC(=O)[O-]', '--json', ...flags])),
    );
    expect(JSON.parse(whole.stdout).atoms).toBe(8);
    expect(JSON.parse(part.stdout)).toMatchObject({ atoms: 7, notes: [{ code: 'molecule/fragments' }, { code: 'energy/built' }] });
  });
  it('refuses a record above the limit of atoms, which is a setting', async () => {
    const { exitCode, stderr } = await tordial(['energy', 'CCCC', '--max-atoms', '10']);
    expect(exitCode).toBe(1);
    expect(stderr).toMatch(/14 atoms.*limit of 10/);
  });
  it('converts the unit', async () => {
    const [kcal, kj] = await Promise.all(['kcal/mol', 'kJ/mol'].map((unit) => tordial(['energy', 'CCO', '--json', '--unit', unit])));
    expect(JSON.parse(kj.stdout).energy / JSON.parse(kcal.stdout).energy).toBeCloseTo(4.184, 4);
  });
});

describe.concurrent('tordial rotors and build', () => {
  it('lists the rotors as a table and as JSON', async () => {
    const [forPeople, json] = await Promise.all([tordial(['rotors', 'COc1ccccc1']), tordial(['rotors', 'COc1ccccc1', '--json'])]);
    expect(forPeople.stdout).toMatch(/1-2 .*aryl ether/);
    expect(JSON.parse(json.stdout).rotors.map(({ axis }: { axis: number[] }) => axis)).toContainEqual([1, 2]);
  });
  it('writes conformers, lowest first, and tells an open stereocentre', async () => {
    const { exitCode, stderr } = await tordial(['build', 'CC(O)CCO', '--conformers', '4', '-o', at('built.sdf')]);
    expect(exitCode).toBe(0);
    expect(stderr).toMatch(/stereocentre C1 is not specified/);
    const energies = [...readFileSync(at('built.sdf'), 'utf8').matchAll(/relative energy[^\n]*\n([^\n]*)/g)].map(([, value]) =>
      Number(value),
    );
    expect(energies.length).toBeGreaterThan(1);
    expect(energies[0]).toBe(0);
    expect(energies).toEqual(energies.toSorted((p, q) => p - q));
  });
});

describe.concurrent('tordial profile', () => {
  it('writes the document, the table, the figure and the frames, the same bytes on every run', async () => {
    const runs = await Promise.all(
      ['one', 'two'].map((name) => tordial(['profile', 'COc1ccccc1', '--torsion', '0,1,2,3', '--step', '15', '-o', at(name)])),
    );
    for (const { exitCode, stdout } of runs) expect([exitCode, stdout]).toEqual([0, '']);
    const files = ['frames.sdf', 'frames.xyz', 'profile.csv', 'profile.json', 'profile.svg'];
    expect(readdirSync(at('one')).sort()).toEqual(files);
    for (const file of files) expect(readFileSync(at(`two/${file}`), 'utf8')).toBe(readFileSync(at(`one/${file}`), 'utf8'));

    const document = readProfile(readFileSync(at('one/profile.json'), 'utf8'));
    expect(document.points.map(({ angle }) => angle)).toEqual(Array.from({ length: 24 }, (_, n) => -180 + 15 * n));
    expect(document.points.every(({ converged }) => converged)).toBe(true);
    expect(document.rotor.parameters.length).toBeGreaterThan(0);
    const frames = readXyz(readFileSync(at('one/frames.xyz'), 'utf8'));
    for (const [n, { coordinates }] of frames.entries()) {
      const degrees = (torsion(coordinates, 0, 1, 2, 3) * 180) / Math.PI;
      expect(Math.cos(((degrees - document.points[n].angle) * Math.PI) / 180)).toBeCloseTo(1, 8);
    }
    expect(readFileSync(at('one/profile.csv'), 'utf8').trim().split('\n')).toHaveLength(25);
    expect(readFileSync(at('one/profile.svg'), 'utf8')).toMatch(/^<svg[\s\S]*kcal\/mol[\s\S]*<\/svg>\s*$/);
  });

  it('prints the document alone on standard output', async () => {
    const { exitCode, stdout } = await tordial(['profile', 'OO', '--torsion', '2,0,1,3', '--step', '30', '--json', '--unit', 'kJ/mol']);
    expect(exitCode).toBe(0);
    expect(readProfile(stdout)).toMatchObject({ unit: 'kJ/mol', rotor: { torsion: [2, 0, 1, 3] } });
  });

  it('gives each rotor and each record a folder of its own', async () => {
    writeFileSync(at('list.smi'), '# an invented list\nCCO ethanol\nCOC\tdimethyl ether\n');
    const { exitCode } = await tordial(['profile', at('list.smi'), '--all', '--step', '60', '-o', at('all')]);
    expect(exitCode).toBe(0);
    expect(readdirSync(at('all')).sort()).toEqual(['dimethyl-ether', 'ethanol']);
    expect(readdirSync(at('all/ethanol')).sort()).toEqual(['rotor-0-1', 'rotor-1-2']);
    // the two methyl groups are equivalent: one scan serves both
    expect(readdirSync(at('all/dimethyl-ether'))).toEqual(['rotor-0-1']);
  });

  it('scans several fragments as given and says so', async () => {
    const { exitCode, stdout, stderr } = await tordial(['profile', 'CO.O', '--rotor', '0-1', '--step', '120', '--json']);
    expect(exitCode).toBe(0);
    expect(stderr).toMatch(/2 separate fragments/);
    expect(JSON.parse(stdout)).toMatchObject({
      molecule: { fragments: 2 },
      notes: expect.arrayContaining([expect.objectContaining({ code: 'molecule/fragments' })]),
    });
  });

  it('starts from given coordinates, rigid or relaxed', async () => {
    mkdirSync(at('given'));
    await tordial(['build', 'CCCl', '-o', at('given/start.xyz')]);
    const [rigid, relaxed] = await Promise.all([
      tordial(['profile', 'CCCl', '--rotor', '0-1', '--step', '60', '--rigid', '--geometry', at('given/start.xyz'), '--json']),
      tordial(['profile', 'CCCl', '--rotor', '0-1', '--step', '60', '--geometry', at('given/start.xyz'), '--json']),
    ]);
    const energies = [rigid, relaxed].map(({ stdout }) => JSON.parse(stdout).points.map(({ energy }: { energy: number }) => energy));
    // a relaxed point is nowhere above the rigid one
    for (const [n, energy] of energies[1].entries()) expect(energy).toBeLessThanOrEqual(energies[0][n] + 1e-4);
    expect(energies[0].some((energy: number, n: number) => energy > energies[1][n] + 0.01)).toBe(true);
  });

  it('writes nothing of a scan that fails', async () => {
    const { exitCode } = await tordial(['profile', 'CCB(O)O', '--rotor', '0-1', '-o', at('failed')]);
    expect(exitCode).toBe(1);
    expect(existsSync(at('failed')) ? readdirSync(at('failed')) : []).toEqual([]);
  });
});

describe.concurrent('help', () => {
  it.each([[[]], [['rotors']], [['energy']], [['build']], [['profile']]])('shows an example: tordial %j --help', async (words) => {
    const { exitCode, stdout } = await tordial([...words, '--help']);
    expect(exitCode).toBe(0);
    expect(stdout).toMatch(/Example:\n {2}tordial /);
  });
  it('prints the version', async () => {
    expect((await tordial(['--version'])).stdout).toMatch(/^\d+\.\d+\.\d+\n$/);
  });
});
