/** One measured line of the bench table. */
export interface BenchRow {
  readonly what: string;
  readonly figure: string;
  readonly note: string;
}

/** Four significant digits at most, without an exponent. */
export function digits(value: number, significant = 3): string {
  if (!Number.isFinite(value)) return 'none';
  if (Math.abs(value) >= 10 ** significant) return Math.round(value).toLocaleString('en-US');
  return String(Number(value.toPrecision(significant)));
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/** Median wall time in ms of a call, after one call to warm up. */
export function medianMs(repeats: number, call: () => unknown): number {
  call();
  const times: number[] = [];
  for (let i = 0; i < repeats; i++) {
    const start = performance.now();
    call();
    times.push(performance.now() - start);
  }
  return median(times);
}

export function markdownTable(rows: readonly BenchRow[]): string {
  const cell = (text: string) => text.replaceAll('|', '\\|').replaceAll('\n', ' ');
  return [
    '| what | figure | note |',
    '|---|---|---|',
    ...rows.map((row) => `| ${cell(row.what)} | ${cell(row.figure)} | ${cell(row.note)} |`),
  ].join('\n');
}
