import { describe, expect, it } from 'vitest';
import { BOLTZMANN_WAVENUMBER } from '../constants.js';
import { basinThermodynamics } from './basin.js';
import { hinderedRotor } from './hindered-rotor.js';
import { constantSeries, seriesOfBarriers } from './periodic-series.js';
import { harmonicThermodynamics } from './thermodynamics.js';

/** One well of a threefold cosine of height V3 (cm-1). */
const third = (V3: number, B: number) => ({
  potential: (phi: number) => (V3 / 2) * (1 - Math.cos(3 * phi)),
  constant: () => B,
  from: -Math.PI / 3,
  to: Math.PI / 3,
  frequency: 3 * Math.sqrt(B * V3),
});

describe('one basin of a hindered rotor', () => {
  it('is a harmonic oscillator where the barrier is high', () => {
    // the next term of the expansion of a cosine well in its quantum over the barrier: kT / 4 V3 of a k
    const { frequency, ...basin } = third(1e6, 10);
    const ours = basinThermodynamics({ ...basin, frequency }, 298.15);
    const oscillator = harmonicThermodynamics([{ energy: 0, quantum: frequency }], 1, 298.15);
    expect(ours.partitionFunction / oscillator.partitionFunction).toBeCloseTo(1, 3);
    expect(ours.entropy).toBeCloseTo(oscillator.entropy, 2);
    expect(ours.heatCapacity).toBeCloseTo(oscillator.heatCapacity, 2);
    expect(ours.enthalpy).toBeCloseTo(oscillator.enthalpy, 3);
  });

  it('is what a symmetric rotor has by Pitzer and Gwinn, and within 2 % of its quantum sum', () => {
    const result = hinderedRotor({ potential: seriesOfBarriers([0, 0, 1024]), constant: constantSeries(10.7), symmetryNumber: 3 }, [450]);
    const [{ pitzerGwinn, quantum }] = result.rows;
    const ours = basinThermodynamics(third(1024, 10.7), 450);
    expect(BOLTZMANN_WAVENUMBER * 450).toBeGreaterThan(3 * Math.sqrt(10.7 * 1024) * 0.95);
    expect(ours.partitionFunction / (pitzerGwinn?.partitionFunction ?? 0)).toBeCloseTo(1, 6);
    expect(ours.entropy).toBeCloseTo(pitzerGwinn?.entropy ?? 0, 5);
    expect(ours.heatCapacity).toBeCloseTo(pitzerGwinn?.heatCapacity ?? 0, 5);
    expect(ours.enthalpy).toBeCloseTo(pitzerGwinn?.enthalpy ?? 0, 6);
    expect(Math.abs(ours.partitionFunction / quantum.partitionFunction - 1)).toBeLessThan(0.02);
  });

  it('is refused without a width or a frequency', () => {
    expect(() => basinThermodynamics({ ...third(1000, 5), to: -2 }, 300)).toThrow(/positive/);
    expect(() => basinThermodynamics({ ...third(1000, 5), frequency: -80 }, 300)).toThrow(/positive/);
    expect(() => basinThermodynamics(third(1000, 5), 0)).toThrow(/above 0 K/);
  });
});
