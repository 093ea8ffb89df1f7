import { type BenchRow, digits } from './report.js';
import { serveApp } from './served.js';

const request = (fromS: number, toS: number) => ({
  skin: { phototype: 'II' },
  target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
  spots: [3, 7, 12].map((diameterMm) => ({ shape: 'circle', diameterMm })),
  cooling: { kind: 'contact', temperatureC: 5 },
  candidates: { wavelengthsNm: { fromNm: 400, toNm: 1100, stepNm: 5 } },
  pulseDurationsS: { fromS, toS, count: 24 },
});

/** The full ranking over HTTP: first in a new process, then again with other pulse durations. */
export async function benchmark(): Promise<BenchRow[]> {
  const app = await serveApp();
  try {
    const rank = async (body: object) => {
      const start = performance.now();
      const reply = await fetch(`${app.address}/v1/rankings`, {
        method: 'POST',
        headers: app.headers,
        body: JSON.stringify(body),
      });
      const text = await reply.text();
      return { status: reply.status, ms: performance.now() - start, considered: JSON.parse(text).result?.considered as number };
    };
    const cold = await rank(request(1e-4, 0.1));
    if (cold.status !== 200)
      return [{ what: 'ranking of 10,152 candidates', figure: 'not measured', note: `answers ${cold.status}` }];
    const warm = await rank(request(2e-4, 0.12));
    const same = await rank(request(1e-4, 0.1));
    const note = '400 to 1100 nm by 5 nm, 24 pulse durations, 3 spots, over HTTP';
    return [
      {
        what: `ranking of ${digits(cold.considered, 5)} candidates, cold process`,
        figure: `${digits(cold.ms)} ms`,
        note: `${note}; target 1 s`,
      },
      { what: 'the same with other pulse durations', figure: `${digits(warm.ms)} ms`, note: 'light kept; target 100 ms' },
      { what: 'the first once more', figure: `${digits(same.ms)} ms`, note: '' },
    ];
  } finally {
    await app.stop();
  }
}
