import { describe, expect, it } from 'vitest';
import { boxesOverlap, segmentMeetsBox } from './boxes.js';
import { segmentEnergy } from './curve-parts.js';
import { FONTS_INSTALLED, pixels } from './pixels.fixture.js';
import { seriesProfile } from './profile.fixture.js';
import { type ProfileLayout, profileLayout } from './profile-layout.js';
import { profilePlot } from './profile-plot.js';

const anisole = seriesProfile('COc1ccccc1', [0, 1, 2, 3], { cosine: [0, -1.6] }, 'anisole');
const butane = seriesProfile('CCCC', [0, 1, 2, 3], { cosine: [0.9, -0.3, 1.8] }, 'butane');
const biaryl = seriesProfile('Cc1ccccc1-c1ccccc1F', [1, 6, 7, 12], { cosine: [0.8, 5, 0, 2.6] }, 'biaryl');
const many = seriesProfile(
  'CC(C)Oc1ccc(F)cc1C(=O)NCc1ccncc1',
  [11, 13, 14, 15],
  { cosine: [1.2, 0.4, 0.3, 0.2, 0, 2], sine: [0.5, 0.2, 0.1] },
  'invented amide',
);
const flat = seriesProfile('CCCC', [0, 1, 2, 3], { cosine: [0, 0, 0.001] }, 'nearly flat');

const DOCUMENTS = [anisole, butane, biaryl, many, flat];

/** Everything that text or lines stand on, in one list of boxes. */
function labelBoxes({ marks }: ProfileLayout) {
  return marks.flatMap(({ label }) => (label ? [label.box] : []));
}

describe('profilePlot', () => {
  it.each(DOCUMENTS)(
    'marks every well and barrier of $molecule.name with angle and energy, free of the curve and of each other',
    (document) => {
      for (const width of [640, 800, 1100]) {
        const layout = profileLayout(document, { width });
        const boxes = labelBoxes(layout);
        expect(boxes).toHaveLength(document.stationaryPoints.length);
        boxes.forEach((box, n) => {
          expect(box.left >= layout.plot.left && box.right <= layout.plot.right).toBe(true);
          expect(box.top >= layout.plot.top && box.bottom <= layout.plot.bottom).toBe(true);
          for (const other of boxes.slice(n + 1)) expect(boxesOverlap(box, other)).toBe(false);
          for (const run of layout.parts.smooth)
            for (const segment of run)
              for (let s = 0; s < 20; s++) {
                const from = segment.from + ((segment.to - segment.from) * s) / 20;
                const to = segment.from + ((segment.to - segment.from) * (s + 1)) / 20;
                const [p, q] = [segmentEnergy(segment, from), segmentEnergy(segment, to)];
                expect(segmentMeetsBox(layout.x(from), layout.energies.y(p), layout.x(to), layout.energies.y(q), box)).toBe(false);
              }
        });
      }
    },
  );

  it.each(DOCUMENTS)('is well-formed, reproducible and draws its text for $molecule.name', (document) => {
    const svg = profilePlot(document);
    expect(svg).toBe(profilePlot(document));
    expect(svg).toContain('Relative energy (kcal/mol)');
    expect(svg).toContain(`<title>${document.molecule.name}</title>`);
    expect(svg).not.toMatch(/NaN|Infinity|undefined/);
    // a renderer without fonts leaves text out in silence; with fonts the picture must change
    expect(pixels(svg, true).equals(pixels(svg, false))).toBe(!FONTS_INSTALLED);
  });

  it('writes angles and energies of the stationary points', () => {
    const svg = profilePlot(anisole);
    for (const text of ['>180.0°<', '>0.0°<', '>90.0°<', '>−90.0°<', '>3.20<', '>0.00<']) expect(svg).toContain(text);
    expect(svg).toContain('Torsion angle C0–O1–C2–C3 (degree)');
  });

  it('gives every stationary point its projection, and one to a pair of mirror images where there are many', () => {
    expect(profileLayout(butane, {}).marks.filter(({ projection }) => projection)).toHaveLength(6);
    const drawn = (width: number) =>
      profileLayout(biaryl, { width }).marks.flatMap(({ projection }) => (projection ? [projection.caption] : []));
    expect(drawn(1000)).toHaveLength(8);
    const captions = drawn(560);
    expect(biaryl.stationaryPoints).toHaveLength(8);
    expect(captions).toHaveLength(5);
    expect(captions.filter((caption) => caption.startsWith('±'))).toHaveLength(3);
  });

  it('draws separate paths where the branch changes, with a mark where it does', () => {
    // a second branch, 1 kcal/mol lower at -100 degrees and rising, known on both sides of the break after -110
    const points = butane.points.map((point, n) => {
      const end = (by: number, slope: number) => ({ energy: point.energy + by, torque: point.torque + slope });
      return {
        ...point,
        breakAfter: n === 7,
        beyond: n === 7 ? { ...butane.points[8], energy: butane.points[8].energy + 1 } : null,
        before: n === 8 ? end(1, 0) : null,
      };
    });
    const kinked = profilePlot({ ...butane, points });
    expect(curvePaths(kinked)).toBe(2);
    expect(kinked).toContain('change of branch');
    expect(kinked).not.toContain('estimated');
    expect(curvePaths(profilePlot(butane))).toBe(1);
    expect(profilePlot(butane)).not.toContain('change of branch');

    const unknown = points.map((point) => ({ ...point, beyond: null, before: null }));
    const svg = profilePlot({ ...butane, points: unknown });
    expect(curvePaths(svg)).toBe(2);
    expect(svg).toContain('estimated');

    const [{ angle, energy }] = profileLayout({ ...butane, points }, {}).parts.changes;
    const crossing = { ...butane.stationaryPoints[0], kind: 'crossing' as const, angle, relativeEnergy: energy };
    const marked = profilePlot({ ...butane, points, stationaryPoints: [crossing] });
    expect(marked).toContain('crossing of branches');
    expect(marked).not.toContain('change of branch');
  });

  it('crosses points that did not converge and says so', () => {
    const document = { ...butane, points: butane.points.map((point, n) => ({ ...point, converged: n !== 4 })) };
    const svg = profilePlot(document);
    expect(svg).toContain('not converged');
    expect(svg).toContain('1 point did not converge.');
    expect(profilePlot(butane)).not.toContain('not converged');
  });

  it('draws a scan that does not begin at -180 up to both edges', () => {
    const points = butane.points.map((point) => ({ ...point, angle: point.angle + 5 }));
    const layout = profileLayout({ ...butane, points }, {});
    const [run] = layout.parts.smooth;
    expect([run[0].from, run[run.length - 1].to]).toEqual([-180, 180]);
  });

  it('writes energies in the unit of the document', () => {
    const svg = profilePlot({ ...anisole, unit: 'kJ/mol' });
    expect(svg).toContain('Relative energy (kJ/mol)');
    expect(svg).toContain('>3.2<');
  });

  it('takes size, title and colours, and shortens long text', () => {
    const svg = profilePlot(
      { ...butane, molecule: { ...butane.molecule, smiles: 'C'.repeat(400) } },
      { width: 640, height: 520, title: 'R&D <1>' },
    );
    expect(svg).toContain('width="640" height="520"');
    expect(svg).toContain('R&amp;D &lt;1&gt;');
    expect(svg).toContain('CCC…CCC');
    expect(pixels(svg, true).length).toBe(640 * 520 * 4);
  });

  it('draws a profile without stationary points, and refuses one without points or without room', () => {
    expect(profilePlot({ ...butane, stationaryPoints: [] })).toContain('No stationary points.');
    expect(() => profilePlot({ ...butane, points: [] })).toThrow(expect.objectContaining({ code: 'profile/points' }));
    expect(() => profilePlot(butane, { height: 200 })).toThrow(expect.objectContaining({ code: 'figure/profile' }));
  });
});

function curvePaths(svg: string): number {
  return svg.match(/stroke-linecap="round"/g)?.length ?? 0;
}
