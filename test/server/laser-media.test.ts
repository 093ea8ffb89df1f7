import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
beforeAll(async () => {
  service = await openTestService();
});
afterAll(() => service.close());

describe('GET /v1/laser-media', () => {
  it('lists lines by wavelength with usual pulse durations, source and status', async () => {
    const { body } = await service.get('/v1/laser-media?limit=500').expect(200);
    const wavelengths = body.items.map(({ wavelengthNm }: { wavelengthNm: number }) => wavelengthNm);
    expect(wavelengths).toEqual([...wavelengths].sort((a, b) => a - b));
    expect(body.next).toBeNull();
    for (const nm of [193, 532, 585, 595, 694.3, 755, 810, 1064, 1450, 2936, 10600]) expect(wavelengths).toContain(nm);
    for (const { pulseMinS, pulseMaxS, source, status } of body.items) {
      expect(pulseMinS).toBeGreaterThan(0);
      expect(pulseMaxS).toBeGreaterThanOrEqual(pulseMinS);
      expect(source).toBeTruthy();
      expect(status).toBeTruthy();
    }
  });

  it('pages with a Link header', async () => {
    const first = await service.get('/v1/laser-media?limit=20').expect(200);
    expect(first.body.items).toHaveLength(20);
    expect(first.headers.link).toMatch(/rel="next"/);
    const second = await service.get(`/v1/laser-media?limit=20&cursor=${first.body.next}`).expect(200);
    expect(second.body.items[0].id).not.toBe(first.body.items[19].id);
  });

  const forged = (position: unknown) => `cursor=${Buffer.from(JSON.stringify(position)).toString('base64url')}`;

  it.each(['limit=0', 'limit=501', 'cursor=nonsense', forged(['abc']), forged([-7]), forged([1, 2]), 'page=2'])(
    'refuses %s',
    async (query) => {
      await service.get(`/v1/laser-media?${query}`).expect(400);
    },
  );
});
