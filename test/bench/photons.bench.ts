import { execFileSync, spawnSync } from 'node:child_process';
import { setMaxListeners } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { planRun, type RunQuestion, runChunk } from '../../domain/transport/monte-carlo.js';
import { openPhotonPool, type PhotonPool } from '../../server/workers/pool.js';
import { type BenchRow, digits, median } from './report.js';

const question: RunQuestion = {
  layers: [
    { name: 'half-space', thicknessUm: 1e7, absorptionPerCm: 1, scatteringPerCm: 100, anisotropy: 0.9, refractiveIndex: 1.4 },
  ],
  beams: [2, 6, 20].map((diameterMm) => ({ shape: 'circle', diameterMm })),
  depthsUm: [0, 500, 1000, 2000, 5000],
};
const perChunk = 10_000;

function oneCorePerCpuSecond(): number {
  const plan = planRun(question);
  const before = process.cpuUsage();
  for (let chunk = 0; chunk < 8; chunk++) runChunk(plan, 1, chunk, perChunk);
  const { user, system } = process.cpuUsage(before);
  return (8 * perChunk * 1e6) / (user + system);
}

async function poolPerSecond(pool: PhotonPool, chunks: number): Promise<number> {
  const never = new AbortController().signal;
  setMaxListeners(0, never);
  const start = performance.now();
  const task = { runKey: 'bench', question, seed: 1, photons: perChunk };
  await Promise.all(Array.from({ length: chunks }, (_, chunk) => pool.walkChunk({ ...task, chunk }, never)));
  return (chunks * perChunk * 1000) / (performance.now() - start);
}

function compilePeer(folder: string): string | null {
  const binary = path.join(folder, 'photon-walk');
  const source = fileURLToPath(new URL('./peer/photon-walk.c', import.meta.url));
  const compiled = spawnSync('cc', ['-O3', '-march=native', '-o', binary, source, '-lm'], { stdio: 'ignore' });
  return compiled.status === 0 ? binary : null;
}

/** TypeScript on one core beside the same walk in C, in turn; then one worker thread against two. */
export async function benchmark(): Promise<BenchRow[]> {
  const folder = mkdtempSync(path.join(tmpdir(), 'photon-walk-'));
  const rows: BenchRow[] = [];
  try {
    const peer = compilePeer(folder);
    oneCorePerCpuSecond();
    const own: number[] = [];
    const theirs: number[] = [];
    for (let turn = 0; turn < 5; turn++) {
      own.push(oneCorePerCpuSecond());
      if (peer) theirs.push(JSON.parse(execFileSync(peer, ['80000'], { encoding: 'utf8' })).photonsPerS);
    }
    rows.push({
      what: 'photons per CPU second, one core',
      figure: digits(median(own)),
      note: 'TypeScript; mu_a 1, mu_s 100 per cm, g 0.9, n 1.4',
    });
    rows.push(
      peer
        ? {
            what: 'photons per CPU second, same walk in C',
            figure: `${digits(median(theirs))} (ours is ${digits(median(own) / median(theirs))} of it)`,
            note: 'cc -O3 -march=native; target 0.6, aim 1',
          }
        : { what: 'photons per CPU second, same walk in C', figure: 'skipped', note: 'no C compiler (cc) here' },
    );
  } finally {
    rmSync(folder, { recursive: true });
  }
  const [single, double] = [openPhotonPool(1), openPhotonPool(2)];
  try {
    await poolPerSecond(single, 4);
    await poolPerSecond(double, 8);
    const ones: number[] = [];
    const twos: number[] = [];
    for (let turn = 0; turn < 3; turn++) {
      ones.push(await poolPerSecond(single, 12));
      twos.push(await poolPerSecond(double, 24));
    }
    rows.push({
      what: 'photons per second, two worker threads',
      figure: `${digits(median(twos))} (${digits(median(twos) / median(ones))} times one thread)`,
      note: 'wall time, pool already warm; target 1.6',
    });
  } finally {
    await single.close();
    await double.close();
  }
  return rows;
}
