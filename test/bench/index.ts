import { readdirSync } from 'node:fs';
import os from 'node:os';
import { type BenchRow, markdownTable } from './report.js';

interface BenchModule {
  readonly benchmark: () => Promise<BenchRow[]> | BenchRow[];
}

const only = process.argv.slice(2);
const files = readdirSync(new URL('.', import.meta.url))
  .filter((name) => name.endsWith('.bench.ts') && (only.length === 0 || only.some((word) => name.includes(word))))
  .sort();
const rows: BenchRow[] = [];
for (const file of files) {
  process.stderr.write(`${file}\n`);
  try {
    const module: BenchModule = await import(new URL(file, import.meta.url).href);
    rows.push(...(await module.benchmark()));
  } catch (error) {
    rows.push({ what: file, figure: 'failed', note: error instanceof Error ? error.message : String(error) });
    process.exitCode = 1;
  }
}
const cpu = os.cpus();
process.stdout.write(
  `Node ${process.version}, ${cpu.length} cores (${cpu[0]?.model.trim() ?? 'unknown'})\n\n${markdownTable(rows)}\n`,
);
