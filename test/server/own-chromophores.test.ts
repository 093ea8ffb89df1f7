import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { withOwnChromophore } from '../../server/api/chromophores/chromophores.store.js';
import { verifyChain } from '../../server/audit/verify.js';
import { openTestService } from '../support/service.js';

let service: Awaited<ReturnType<typeof openTestService>>;
beforeAll(async () => {
  service = await openTestService();
});
afterAll(() => service.close());

const ink = {
  name: 'black ink, lot 7',
  source: 'own measurement, integrating sphere',
  measuredAt: '2026-02-11T10:00:00+01:00',
  relativeUncertainty: 0.1,
  wavelengthsNm: [500, 700, 900],
  absorptionsPerCm: [5000, 4000, 3000],
};
const path = '/v1/chromophores';

describe("a clinic's own chromophores", () => {
  it('are stored by a physicist, read back, listed, and give a spectrum within their range alone', async () => {
    const made = await service.post(path, ink, 'physicist').expect(201);
    const { item } = made.body;
    expect(made.headers.location).toBe(`${path}/${item.id}`);
    expect(item).toMatchObject({ name: ink.name, unit: '1/cm', fromNm: 500, toNm: 900, points: 3 });
    expect(item.sources).toEqual([{ key: 'own', citation: ink.source }]);
    expect(item.own.relativeUncertainty).toBe(0.1);
    expect(item.spread).toEqual({ factor: 1.2, fromNm: 500, toNm: 900 });
    expect((await service.get(`${path}/${item.id}`).expect(200)).body.item).toEqual(item);
    const listed = (await service.get(`${path}?limit=500`).expect(200)).body.items;
    expect(listed.at(-1)).toEqual(item);
    const { result } = (await service.get(`${path}/${item.id}/spectrum?fromNm=600&toNm=700&stepNm=100`).expect(200)).body;
    expect(result.absorptionsPerCm[0]).toBeCloseTo(Math.sqrt(5000 * 4000), 6); // between its points in the logarithm
    await service.get(`${path}/${item.id}/spectrum?fromNm=400&toNm=700`).expect(400);
    const short = (await service.get(`${path}/${item.id}/wavelengths?phototype=II&depthMm=1`).expect(200)).body.result;
    expect(short.items.every(({ wavelengthNm }: { wavelengthNm: number }) => wavelengthNm >= 500 && wavelengthNm <= 900)).toBe(
      true,
    );
  });

  it('belong to their clinic: another sees none of them', async () => {
    const { id } = (await service.post(path, ink, 'physicist').expect(201)).body.item;
    await service.get(`${path}/${id}`, 'administrator', 'south').expect(404);
    await service.get(`${path}/${id}/spectrum`, 'administrator', 'south').expect(404);
    const { items } = (await service.get(`${path}?limit=500`, 'reader', 'south').expect(200)).body;
    expect(items.map((item: { id: string }) => item.id)).not.toContain(id);
    const { db, reference } = service.parts;
    expect(withOwnChromophore({ db, clinicId: 'south' }, reference, id)).toBe(reference);
    expect(withOwnChromophore({ db, clinicId: 'north' }, reference, id).chromophores.get(id)!.name).toBe(ink.name);
    expect(reference.chromophores.has(id)).toBe(false);
  });

  it("stand as chromophoreId in that clinic's calculations alone", async () => {
    const { id } = (await service.post(path, ink, 'physicist').expect(201)).body.item;
    const body = {
      skin: { phototype: 'II' },
      target: { kind: 'dermal-pigment', granuleDiameterUm: 1, depthMm: 0.5, chromophoreId: id },
      wavelengthNm: 694.3,
      spot: { shape: 'circle', diameterMm: 4 },
      pulse: { durationS: 2e-8 },
    };
    const window = '/v1/calculations/window';
    const { targetThresholdJPerCm2 } = (await service.post(window, body).expect(200)).body.result;
    expect(targetThresholdJPerCm2).toBeGreaterThan(0);
    const thin = { ...ink, absorptionsPerCm: ink.absorptionsPerCm.map((value) => value / 2) };
    const other = (await service.post(path, thin, 'physicist').expect(201)).body.item.id;
    const thinner = { ...body, target: { ...body.target, chromophoreId: other } };
    expect((await service.post(window, thinner).expect(200)).body.result.targetThresholdJPerCm2).toBeGreaterThan(
      targetThresholdJPerCm2,
    );
    const { wavelengthNm, spot, pulse, ...question } = body;
    const ranking = {
      ...question,
      spot,
      candidates: { wavelengthsNm: [wavelengthNm, 755] },
      pulseDurationsS: [pulse.durationS],
    };
    expect((await service.post('/v1/rankings', ranking).expect(200)).body.result.considered).toBe(2);
    await service.post(window, body, 'reader', 'south').expect(422);
    await service.post('/v1/rankings', ranking, 'reader', 'south').expect(422);
  });

  it('change the ETag of the list', async () => {
    const before = (await service.get(path).expect(200)).headers.etag!;
    await service.post(path, ink, 'physicist').expect(201);
    await service.get(path).set('if-none-match', before).expect(200);
  });

  it('are listed page by page after the published ones, none twice', async () => {
    const all = (await service.get(`${path}?limit=500`)).body.items.map(({ id }: { id: string }) => id);
    const seen: string[] = [];
    for (let next: string | null = ''; next !== null; ) {
      const page: { items: { id: string }[]; next: string | null } = (
        await service.get(`${path}?limit=2${next === '' ? '' : `&cursor=${next}`}`).expect(200)
      ).body;
      seen.push(...page.items.map(({ id }) => id));
      next = page.next;
    }
    expect(seen).toEqual(all);
  });

  it('are never changed or deleted', async () => {
    const { id } = (await service.post(path, ink, 'physicist').expect(201)).body.item;
    const { db } = service.parts;
    expect(() => db.prepare('UPDATE own_chromophores SET content = ? WHERE id = ?').run('{}', id)).toThrow(/append-only/);
    expect(() => db.prepare('DELETE FROM own_chromophores WHERE id = ?').run(id)).toThrow(/append-only/);
  });

  it("leave an entry in the clinic's chain, which verifies", async () => {
    const before = await verifyChain(service.parts.db, 'north');
    await service.post(path, ink, 'physicist').expect(201);
    const after = await verifyChain(service.parts.db, 'north');
    expect(after.ok).toBe(true);
    expect(after.entries).toBe(before.entries + 1);
    expect(after.rows).toBe(before.rows + 1);
  });

  it('are stored once for one Idempotency-Key', async () => {
    const send = () => service.post(path, ink, 'physicist').set('idempotency-key', 'ink-7');
    const [first, second] = [await send(), await send()];
    expect(first.status).toBe(201);
    expect(second.body.item.id).toBe(first.body.item.id);
  });

  it.each(['reader', 'operator'] as const)('are refused from a %s', async (role) => {
    await service.post(path, ink, role).expect(403);
  });

  it.each([
    ['columns of unequal length', { absorptionsPerCm: [1, 2] }, ['/absorptionsPerCm']],
    ['wavelengths that do not rise', { wavelengthsNm: [500, 500, 900] }, ['/wavelengthsNm/1']],
    ['one point', { wavelengthsNm: [500], absorptionsPerCm: [1] }, ['/wavelengthsNm', '/absorptionsPerCm']],
    ['a negative absorption', { absorptionsPerCm: [1, -2, 3] }, ['/absorptionsPerCm/1']],
    ['text for a number', { absorptionsPerCm: [1, '2', 3] }, ['/absorptionsPerCm/1']],
    ['no source', { source: undefined }, ['/source']],
    ['an unknown field', { color: 'black' }, ['/color']],
    ['a measurement without an offset', { measuredAt: '2026-02-11' }, ['/measuredAt']],
    ['two faults at once', { name: '', wavelengthsNm: [500, 700, 1e9] }, ['/name', '/wavelengthsNm/2']],
  ])('refuse %s, naming every fault', async (_, change, pointers) => {
    const { body } = await service.post(path, { ...ink, ...change }, 'physicist').expect(422);
    expect(body.errors.map((fault: { pointer: string }) => fault.pointer).sort()).toEqual([...pointers].sort());
  });
});
