const UNITS: readonly (readonly [number, string])[] = [
  [365.25 * 86400, 'years'],
  [86400, 'd'],
  [3600, 'h'],
  [60, 'min'],
  [1, 's'],
  [1e-3, 'ms'],
  [1e-6, 'us'],
  [1e-9, 'ns'],
  [1e-12, 'ps'],
];

/** A time in seconds as people say it, two significant figures: '3.2 h', '41 d', '1.5e+12 years'; below a picosecond in ps. */
export function durationInWords(seconds: number): string {
  const [size, unit] = UNITS.find(([length]) => seconds >= 0.995 * length) ?? UNITS[UNITS.length - 1];
  const value = seconds / size;
  const figures = value >= 1e4 || value < 0.01 ? value.toExponential(1) : String(Number(value.toPrecision(2)));
  return `${figures} ${unit}`;
}
