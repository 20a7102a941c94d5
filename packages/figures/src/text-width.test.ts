import { describe, expect, it } from 'vitest';
import { drawnBox, FACE_INSTALLED } from './pixels.fixture.js';
import { fitText, textWidth } from './text-width.js';

const TEXTS = ['Relative energy (kcal/mol)', 'COc1ccccc1', '−121.0°', 'C0–O1–C2–C3', 'MMFF94s · 10° steps', 'i-Pr', 'WAVy jQ@%'];

describe('textWidth', () => {
  it.runIf(FACE_INSTALLED).each(['normal', 'bold'])('bounds the width that a renderer draws in DejaVu Sans (%s)', (weight) => {
    for (const text of TEXTS) {
      const drawn = drawnBox(
        `<svg xmlns="http://www.w3.org/2000/svg" width="900" height="60"><text x="10" y="40" font-size="20" font-weight="${weight}" font-family="'DejaVu Sans'">${text}</text></svg>`,
      );
      const width = textWidth(text, 20, weight === 'bold');
      // ink is narrower than the advance width by the side bearings of the first and last letter
      expect(drawn?.width).toBeLessThanOrEqual(width + 0.5);
      expect(drawn?.width).toBeGreaterThan(0.9 * width - 2);
    }
  });
});

describe('fitText', () => {
  it('keeps what fits and cuts the middle out of what does not', () => {
    expect(fitText('CCO', 100, 10)).toBe('CCO');
    const long = 'CC(C)Oc1ccc(F)cc1C(=O)NCc1ccncc1';
    const cut = fitText(long, 120, 10);
    expect(textWidth(cut, 10)).toBeLessThanOrEqual(120);
    const [head, tail] = cut.split('…');
    expect(long.startsWith(head) && long.endsWith(tail) && head.length > 5).toBe(true);
    expect(fitText(long, 3, 10)).toBe('…');
  });
});
