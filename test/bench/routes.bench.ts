import autocannon from 'autocannon';
import { type BenchRow, digits, median } from './report.js';
import { type ServedApp, serveApp } from './served.js';

const calculations = [
  {
    path: '/v1/calculations/fluence',
    body: {
      wavelengthNm: 595,
      pulseEnergyJ: 3,
      pulse: { durationS: 0.0015 },
      spot: { shape: 'circle', diameterMm: 7 },
      transmissionFraction: 0.95,
      repetitionRateHz: 1,
      pulseCount: 3,
      asOf: '2026-03-01T09:00:00Z',
    },
  },
  {
    path: '/v1/calculations/exposure-limits',
    body: { wavelengthNm: 1064, pulse: { durationS: 0.01 }, repetitionRateHz: 2, pulseCount: 20, asOf: '2026-03-01T09:00:00Z' },
  },
  { path: '/v1/calculations/relaxation', body: { geometry: 'cylinder', sizeUm: 100, asOf: '2026-03-01T09:00:00Z' } },
];

async function perCpuSecond(app: ServedApp, path: string, body: string, seconds: number): Promise<number> {
  const before = await app.cpuS();
  const load = await autocannon({
    url: app.address + path,
    method: 'POST',
    headers: app.headers,
    body,
    connections: 16,
    duration: seconds,
  });
  if (load.non2xx > 0 || load.errors > 0) throw new Error(`${path}: ${load.non2xx} refusals, ${load.errors} errors`);
  return load['2xx'] / ((await app.cpuS()) - before);
}

/** Validated calculations against a route that answers a constant of the same size, in turn, per second of the server's processor. */
export async function benchmark(): Promise<BenchRow[]> {
  const app = await serveApp();
  const rows: BenchRow[] = [];
  try {
    for (const { path, body: fields } of calculations) {
      const body = JSON.stringify(fields);
      const reply = await fetch(app.address + path, { method: 'POST', headers: app.headers, body });
      if (reply.status !== 200) {
        rows.push({ what: `POST ${path}`, figure: 'not measured', note: `answers ${reply.status}` });
        continue;
      }
      await app.answerConstantly(await reply.json());
      for (const warm of [path, '/constant']) await perCpuSecond(app, warm, body, 2);
      const own: number[] = [];
      const constant: number[] = [];
      for (let turn = 0; turn < 5; turn++) {
        own.push(await perCpuSecond(app, path, body, 1));
        constant.push(await perCpuSecond(app, '/constant', body, 1));
      }
      rows.push({
        what: `POST ${path}, requests per CPU second`,
        figure: `${digits(median(own))} (${digits(median(own) / median(constant))} of a constant route's ${digits(median(constant))})`,
        note: 'same hooks, body and reply size; 16 connections; target 0.6',
      });
    }
  } finally {
    await app.stop();
  }
  return rows;
}
