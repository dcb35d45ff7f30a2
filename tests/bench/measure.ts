/** The middle of some times. */
export function medianOf(times: readonly number[]): number {
  const sorted = [...times].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] as number;
}

/** One line of a table: ours, the yardstick, and their ratio. */
export function lineOf(name: string, ours: number, yardstick: number, note = ''): void {
  console.log(
    `${name.padEnd(28)} ${ours.toFixed(2).padStart(9)} ms  bare ${yardstick.toFixed(2).padStart(8)} ms  ratio ${(ours / yardstick).toFixed(2).padStart(6)}   ${note}`,
  );
}
