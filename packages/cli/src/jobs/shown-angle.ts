/** An angle (degrees) as tables show it: one decimal, no negative zero. */
export function shownAngle(angle: number): string {
  const text = angle.toFixed(1);
  return text === '-0.0' ? '0.0' : text;
}
