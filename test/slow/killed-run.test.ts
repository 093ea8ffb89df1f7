import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { afterAll, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
const folder = mkdtempSync(path.join(tmpdir(), 'killed-run-'));
const key = 'an-administrator-key-of-this-test-only';
const running: ChildProcess[] = [];

afterAll(() => {
  for (const child of running) child.kill('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

async function serve(): Promise<{ child: ChildProcess; address: string }> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/cli/main.ts', 'start'], {
    cwd: root,
    env: {
      ...process.env,
      PORT: '0',
      DATABASE_URL: `file:${path.join(folder, 'ledger.sqlite')}`,
      ADMIN_KEY: key,
      WORKER_THREADS: '2',
      LOG_LEVEL: 'error',
    },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  running.push(child);
  for await (const line of createInterface({ input: child.stdout! })) {
    const address = /^listening (\S+)/.exec(line)?.[1];
    if (address) return { child, address };
  }
  throw new Error('the service ended before it listened');
}

interface Item {
  readonly id: string;
  readonly status: string;
  readonly photonsDone: number;
  readonly result?: object;
}

async function call(url: string, body?: object): Promise<Item> {
  const headers = { authorization: `Bearer ${key}`, ...(body ? { 'content-type': 'application/json' } : {}) };
  const reply = await fetch(url, { headers, ...(body ? { method: 'POST', body: JSON.stringify(body) } : {}) });
  return ((await reply.json()) as { item: Item }).item;
}

const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

async function ended(url: string) {
  for (;;) {
    const item = await call(url);
    if (item.status !== 'queued' && item.status !== 'running') return item;
    await pause(50);
  }
}

it('a run whose process is killed goes on after the restart to the same bytes; the waiting one follows; nothing hangs', async () => {
  const layers = [{ thicknessUm: 20_000, absorptionPerCm: 1, scatteringPerCm: 200, anisotropy: 0.8, refractiveIndex: 1.4 }];
  const request = { skin: { layers }, spot: { shape: 'circle', diameterMm: 5 }, depthsMm: [0.5, 1], photons: 600_000, seed: 8 };

  const first = await serve();
  const long = (await call(`${first.address}/v1/reference-runs`, request)).id;
  const waiting = (await call(`${first.address}/v1/reference-runs`, { ...request, photons: 20_000 })).id;
  for (;;) {
    const item = await call(`${first.address}/v1/reference-runs/${long}`);
    expect(item.status).not.toBe('done');
    if (item.photonsDone > 0) break;
    await pause(20);
  }
  first.child.kill('SIGKILL');
  await once(first.child, 'exit');

  const second = await serve();
  const before = await call(`${second.address}/v1/reference-runs/${long}`);
  expect(before.photonsDone).toBeGreaterThan(0);
  const resumed = await ended(`${second.address}/v1/reference-runs/${long}`);
  expect(resumed.status).toBe('done');
  expect((await ended(`${second.address}/v1/reference-runs/${waiting}`)).status).toBe('done');
  const straight = (await call(`${second.address}/v1/reference-runs`, request)).id;
  const undisturbed = await ended(`${second.address}/v1/reference-runs/${straight}`);
  expect({ ...resumed.result, elapsedS: 0 }).toEqual({ ...undisturbed.result, elapsedS: 0 });

  second.child.kill('SIGTERM');
  const [code] = await once(second.child, 'exit');
  expect(code).toBe(0);
});

it('a stop in the middle of a run is clean and quick, and leaves the run to the next process', async () => {
  const layers = [{ thicknessUm: 20_000, absorptionPerCm: 1, scatteringPerCm: 200, anisotropy: 0.8, refractiveIndex: 1.4 }];
  const endless = { skin: { layers }, broadBeam: true, depthsMm: [1], photons: 1_000_000_000, maxSeconds: 3600 };
  const first = await serve();
  const { id } = await call(`${first.address}/v1/reference-runs`, endless);
  await pause(300);
  first.child.kill('SIGTERM');
  const [code] = await once(first.child, 'exit');
  expect(code).toBe(0);
  const second = await serve();
  expect(['queued', 'running']).toContain((await call(`${second.address}/v1/reference-runs/${id}`)).status);
  const cancelled = await fetch(`${second.address}/v1/reference-runs/${id}`, {
    method: 'DELETE',
    headers: { authorization: `Bearer ${key}` },
  });
  expect(((await cancelled.json()) as { item: Item }).item.status).toBe('cancelled');
});
