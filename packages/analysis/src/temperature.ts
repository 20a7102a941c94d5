import { TordialError } from '@tordial/geometry';

/** Throws `analysis/temperature` unless T is a finite number of kelvins above zero. */
export function requireTemperature(temperature: number): void {
  if (!(temperature > 0) || !Number.isFinite(temperature))
    throw new TordialError('analysis/temperature', `a temperature of ${temperature} K: give a value above 0 K (25 C is 298.15 K)`);
}
