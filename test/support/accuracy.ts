import { type Comparison, compare, listTopics, readTruth, solversOf } from './truth.js';

// Prints how far the program is from the figures of the truth files, as a markdown table. A miss fails nothing here; the tests gate.

function quantile(sorted: readonly number[], share: number): number {
  return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)]!;
}

function percent(value: number): string {
  if (!Number.isFinite(value)) return 'no value';
  const percents = 100 * value;
  if (percents === 0) return '0 %';
  return percents < 1e-4 ? '< 0.0001 %' : `${Number(percents.toPrecision(2))} %`;
}

function rowOf(topic: string, quantity: string, comparisons: readonly Comparison[]): string {
  const errors = comparisons.map(({ error }) => (Number.isNaN(error) ? Number.POSITIVE_INFINITY : error)).sort((a, b) => a - b);
  const mean = errors.reduce((sum, error) => sum + error, 0) / errors.length;
  const misses = comparisons.filter(({ within }) => !within).length;
  const figures = [mean, quantile(errors, 0.5), quantile(errors, 0.9), errors[errors.length - 1]!].map(percent);
  return `| ${[topic, quantity, errors.length, ...figures, misses].join(' | ')} |`;
}

const lines = [
  '| topic | quantity | n | mean | median | 90 % | max | misses |',
  '| --- | --- | ---: | ---: | ---: | ---: | ---: | ---: |',
];
const missed: string[] = [];
let published = 0;
let computed = 0;
for (const topic of listTopics()) {
  const solvers = await solversOf(topic);
  const comparisons = readTruth(topic).map((row) => compare(row, solvers));
  const ours = comparisons.filter(({ row }) => row.status === 'computed').length;
  computed += ours;
  published += comparisons.length - ours;
  for (const quantity of new Set(comparisons.map(({ row }) => row.quantity))) {
    lines.push(
      rowOf(
        topic,
        quantity,
        comparisons.filter(({ row }) => row.quantity === quantity),
      ),
    );
  }
  for (const { row, found } of comparisons.filter(({ within }) => !within)) {
    const why = row.knownMiss === '' ? '' : `; ${row.knownMiss}`;
    missed.push(
      `- ${topic} ${row.id}, ${row.quantity}: ${Number(found.toPrecision(4))} against ${row.expected} ${row.unit} (${row.source})${why}`,
    );
  }
}
process.stdout.write(
  `${lines.join('\n')}\n\n${published} published or analytic figures and ${computed} computed by an independent method, ${missed.length} missed. Errors are relative, or absolute where the figure is zero.\n${missed.map((line) => `${line}\n`).join('')}`,
);
