import { describe, expect, it } from 'vitest';
import { openJobQueue } from '../../server/jobs/job-queue.js';

function recorder(mostWaiting: number) {
  const events: string[] = [];
  const ends = new Map<string, () => void>();
  const queue = openJobQueue(mostWaiting, (id, signal) => {
    events.push(`start ${id}`);
    return new Promise<void>((resolve) => {
      ends.set(id, resolve);
      signal.addEventListener('abort', () => {
        events.push(`abort ${id}`);
        resolve();
      });
    });
  });
  const settle = () => new Promise((resolve) => setImmediate(resolve));
  return { queue, events, ends, settle };
}

describe('job queue', () => {
  it('works on one job at a time, in order', async () => {
    const { queue, events, ends, settle } = recorder(5);
    for (const id of ['a', 'b', 'c']) expect(queue.offer(id)).toBe(true);
    expect(events).toEqual(['start a']);
    ends.get('a')!();
    await settle();
    expect(events).toEqual(['start a', 'start b']);
    expect(queue.waiting).toBe(1);
  });

  it('refuses when full, but takes in what an earlier process left', () => {
    const { queue } = recorder(1);
    expect(queue.isFull).toBe(false);
    expect([queue.offer('a'), queue.offer('b'), queue.offer('c')]).toEqual([true, true, false]);
    expect(queue.isFull).toBe(true);
    expect(queue.offer('d', true)).toBe(true);
    expect(queue.waiting).toBe(2);
  });

  it('cancels a waiting job and aborts the running one, after which the next starts', async () => {
    const { queue, events, settle } = recorder(5);
    for (const id of ['a', 'b', 'c']) queue.offer(id);
    expect([queue.cancel('b'), queue.cancel('a'), queue.cancel('x')]).toEqual([true, true, false]);
    await settle();
    expect(events).toEqual(['start a', 'abort a', 'start c']);
  });

  it('closes: aborts the running job, starts nothing more and refuses new ones', async () => {
    const { queue, events } = recorder(5);
    queue.offer('a');
    queue.offer('b');
    await queue.close();
    expect(events).toEqual(['start a', 'abort a']);
    expect(queue.offer('c')).toBe(false);
  });
});
