import { afterAll, describe, expect, it } from 'vitest';
import { openPhotonPool } from '../../server/workers/pool.js';
import { progressFraction, pursueRun, type RunOrder, type RunState } from '../../server/workers/pursue-run.js';

const order: RunOrder = {
  question: {
    layers: [
      { name: 'epidermis', thicknessUm: 60, absorptionPerCm: 20, scatteringPerCm: 400, anisotropy: 0.8, refractiveIndex: 1.4 },
      { name: 'dermis', thicknessUm: 2000, absorptionPerCm: 1, scatteringPerCm: 200, anisotropy: 0.8, refractiveIndex: 1.4 },
    ],
    beams: [{ shape: 'circle', diameterMm: 5 }],
    depthsUm: [100, 500],
  },
  seed: 3,
  photonsPerChunk: 100,
  chunkLimit: 48,
  standardErrorTarget: null,
  maxSeconds: 600,
};
const one = openPhotonPool(1);
const two = openPhotonPool(2);
const never = new AbortController().signal;

afterAll(async () => {
  await one.close();
  await two.close();
});

describe('photon runs on worker threads', () => {
  it('give the same bytes on one thread, on two, and when broken off and taken up again', async () => {
    const single = await pursueRun(order, null, one, never, () => {});
    const double = await pursueRun(order, null, two, never, () => {});
    expect(double.state.tally).toEqual(single.state.tally);
    expect(single.stoppedBy).toBe('photons');

    const breakOff = new AbortController();
    let kept: RunState | null = null;
    const broken = pursueRun(order, null, two, breakOff.signal, (state) => {
      if (state.tally.chunks > 17) return;
      kept = state;
      if (state.tally.chunks === 17) breakOff.abort();
    });
    await expect(broken).rejects.toThrow();
    const resumed = await pursueRun(order, kept, two, never, () => {});
    expect(resumed.state.tally).toEqual(single.state.tally);
  });

  it('stop at the standard error asked for, at the same chunk on any number of threads', async () => {
    const loose = { ...order, standardErrorTarget: 0.2, chunkLimit: 1000 };
    const states: RunState[] = [];
    const single = await pursueRun(loose, null, one, never, (state) => states.push(state));
    const double = await pursueRun(loose, null, two, never, () => {});
    expect(single.stoppedBy).toBe('standard-error');
    expect(double.state.tally).toEqual(single.state.tally);
    expect(single.state.tally.chunks).toBeLessThan(1000);
    expect(progressFraction(loose, states[4]!)).toBeGreaterThan(0);
    expect(progressFraction(loose, states.at(-1)!)).toBe(1);
  });

  it('stop by time with ten chunks or more, and say so when there is too little to state an error', async () => {
    const short = { ...order, chunkLimit: 1000, maxSeconds: 50 };
    const seen: RunState[] = [];
    await pursueRun({ ...order, chunkLimit: 12 }, null, one, never, (state) => seen.push(state));
    const late = (chunks: number): RunState => ({ ...seen[chunks - 1]!, elapsedS: 60 });
    const { state, stoppedBy } = await pursueRun(short, late(10), two, never, () => {});
    expect([stoppedBy, state.tally.chunks]).toEqual(['time', 10]);
    await expect(pursueRun(short, late(9), two, never, () => {})).rejects.toThrow(/Only 900 photons could be followed in 50 s/);
  });
});
