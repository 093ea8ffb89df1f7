import { execFileSync, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { type BenchRow, digits, median } from './report.js';

const root = fileURLToPath(new URL('../..', import.meta.url));

async function startOnce(folder: string): Promise<{ ms: number; residentMb: number }> {
  const start = performance.now();
  const child = spawn(process.execPath, ['dist/server/cli/main.js', 'start'], {
    cwd: root,
    env: { ...process.env, PORT: '0', DATABASE_URL: `file:${path.join(folder, 'ledger.sqlite')}`, LOG_LEVEL: 'error' },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  for await (const line of createInterface({ input: child.stdout })) {
    if (!line.startsWith('listening')) continue;
    const ms = performance.now() - start;
    await new Promise((resolve) => setTimeout(resolve, 500));
    const residentKb = Number(execFileSync('ps', ['-o', 'rss=', '-p', String(child.pid)], { encoding: 'utf8' }));
    child.kill('SIGTERM');
    await once(child, 'exit');
    return { ms, residentMb: residentKb / 1024 };
  }
  throw new Error('the service ended before it listened');
}

/** From the command to `listening`, compiled, on a database that exists; memory half a second later. */
export async function benchmark(): Promise<BenchRow[]> {
  execFileSync(process.execPath, ['node_modules/typescript/bin/tsc', '-p', 'tsconfig.build.json'], {
    cwd: root,
    stdio: 'inherit',
  });
  const folder = mkdtempSync(path.join(tmpdir(), 'start-up-'));
  try {
    await startOnce(folder);
    const starts = [];
    for (let i = 0; i < 5; i++) starts.push(await startOnce(folder));
    return [
      {
        what: 'start-up to listening',
        figure: `${digits(median(starts.map(({ ms }) => ms)))} ms`,
        note: 'compiled, wall time, median of 5',
      },
      {
        what: 'resident memory, idle',
        figure: `${digits(median(starts.map(({ residentMb }) => residentMb)))} MiB`,
        note: 'half a second after listening',
      },
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
