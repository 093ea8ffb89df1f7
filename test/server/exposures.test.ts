import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import {
  added,
  area7Cm2,
  type Clinics,
  calibration,
  course,
  dyeLaser,
  exposure,
  openClinics,
  protocol,
  spot7,
} from '../support/clinic.js';

let clinic: Clinics;
let deviceId: string;
const operator = { role: 'operator' } as const;

beforeEach(async () => {
  clinic = await openClinics();
  deviceId = await added(clinic, '/v1/devices', dyeLaser);
});
afterEach(() => clinic.close());

const log = (body: object) => clinic.post('/v1/exposures', body, operator);
const rules = (alerts: { rule: string }[]) => alerts.map(({ rule }) => rule);

describe('one exposure', () => {
  it('is stored with what was delivered under its calibration', async () => {
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(1.1));
    const reply = await log(exposure(deviceId, 'a'));
    expect(reply.status).toBe(201);
    const { item } = reply.body;
    expect(item.deliveredFluenceJPerCm2).toBeCloseTo(8.8, 9);
    expect(item.lowJPerCm2).toBeLessThan(8.8);
    expect(item.highJPerCm2).toBeGreaterThan(8.8);
    expect(item.incomplete).toContain('site');
    expect(item.alerts).toEqual([]);
    const read = await clinic.get(reply.headers.location);
    expect(read.body.item).toMatchObject({
      externalId: 'a',
      calibration: { basis: 'measured', lapsed: false },
      status: 'stored',
    });
    expect(read.headers.etag).toBe('"v1"');
  });

  it('is known the second time, and refused with other content', async () => {
    const first = await log(exposure(deviceId, 'a'));
    const second = await log(exposure(deviceId, 'a'));
    expect([second.status, second.body.item.status, second.body.item.id]).toEqual([200, 'duplicate', first.body.item.id]);
    const other = await log(exposure(deviceId, 'a', { pulseCount: 2 }));
    expect(other.status).toBe(409);
    expect(other.body.errors[0].pointer).toBe('/externalId');
  });

  it.each(['deviceId', 'externalId', 'at', 'wavelengthNm', 'spot', 'pulse', 'set', 'pulseCount'])(
    'without %s gives one fault with its pointer',
    async (field) => {
      const body: Record<string, unknown> = exposure(deviceId, 'a');
      delete body[field];
      const reply = await log(body);
      expect([reply.status, reply.body.errors.length, reply.body.errors[0].pointer]).toEqual([422, 1, `/${field}`]);
    },
  );

  it.each([
    ['a time without offset', { at: '2026-02-20T10:00:00' }, '/at'],
    ['a number as text', { wavelengthNm: '595' }, '/wavelengthNm'],
    ['an unknown field', { fluence: 8 }, '/fluence'],
    ['an unknown device', { deviceId: 'nope' }, '/deviceId'],
    ['an unknown course', { courseId: 'nope' }, '/courseId'],
    ['an unknown protocol', { protocolId: 'nope' }, '/protocolId'],
    ['more stacked than fired', { stackCount: 3 }, '/stackCount'],
    ['an e-mail address in notes', { notes: 'write to ann@example.org' }, '/notes'],
    ['a telephone number in notes', { notes: 'call +49 171 5550 123' }, '/notes'],
    ['a date of birth in notes', { notes: 'born 12.03.1985' }, '/notes'],
  ])('with %s is refused with a hint', async (_what, more, pointer) => {
    const reply = await log(exposure(deviceId, 'a', more));
    expect(reply.status).toBe(422);
    expect(reply.body.errors.map((fault: { pointer: string }) => fault.pointer)).toContain(pointer);
  });

  it('takes unknown with a reason as a value', async () => {
    const reply = await log(
      exposure(deviceId, 'a', { cooling: { unknown: 'paper record is torn' }, notes: '595 nm 0.45 1.5 3.0 ms tried' }),
    );
    expect(reply.status).toBe(201);
    expect(reply.body.item.incomplete).not.toContain('cooling');
  });

  it("of another clinic's device, course or id is not there", async () => {
    const stored = await log(exposure(deviceId, 'a'));
    const south = { role: 'administrator', clinic: 'south' } as const;
    expect((await clinic.get(stored.headers.location, south)).status).toBe(404);
    expect((await clinic.post('/v1/exposures', exposure(deviceId, 'b'), south)).status).toBe(422);
    expect((await clinic.get(`/v1/exposures?deviceId=${deviceId}`, south)).body.items).toEqual([]);
    expect((await clinic.get('/v1/exposures', south)).body.items).toEqual([]);
  });
});

describe('many exposures', () => {
  it('are each stored or refused on their own', async () => {
    const items = [
      exposure(deviceId, 'a'),
      exposure(deviceId, 'a'),
      { deviceId },
      exposure(deviceId, 'b', { spot: { shape: 'circle', diameterMm: 12 } }),
    ];
    const reply = await log({ items });
    expect(reply.status).toBe(200);
    expect(reply.body.items.map((item: { status: string }) => item.status)).toEqual([
      'stored',
      'duplicate',
      'rejected',
      'stored',
    ]);
    expect(reply.body.items[2].errors.length).toBeGreaterThan(3);
    expect(rules(reply.body.items[3].alerts)).toContain('wrong-spot');
  });

  it('are at least one and nothing else', async () => {
    expect((await log({ items: [] })).status).toBe(422);
    expect((await log({ items: [exposure(deviceId, 'a')], more: 1 })).body.errors[0].pointer).toBe('/more');
  });

  it('replay under an Idempotency-Key', async () => {
    const send = (body: object) => clinic.post('/v1/exposures', body, operator).set('idempotency-key', 'k1');
    const first = await send({ items: [exposure(deviceId, 'a')] });
    const second = await send({ items: [exposure(deviceId, 'a')] });
    expect(second.text).toBe(first.text);
    expect((await send({ items: [exposure(deviceId, 'b')] })).status).toBe(422);
  });

  it('come as lines and are answered by lines', async () => {
    const lines = [
      JSON.stringify(exposure(deviceId, 'a')),
      '',
      'not json',
      JSON.stringify(exposure(deviceId, 'b')),
      'x'.repeat(70_000),
    ];
    const reply = await clinic
      .call('post', '/v1/exposures', operator)
      .set('content-type', 'application/x-ndjson')
      .send(lines.join('\n'));
    expect(reply.status).toBe(200);
    expect(reply.headers['clinical-banner']).toBeDefined();
    const answers = reply.text
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(answers.map(({ index, status }) => [index, status])).toEqual([
      [0, 'stored'],
      [2, 'rejected'],
      [3, 'stored'],
      [4, 'rejected'],
    ]);
    const keyed = await clinic
      .call('post', '/v1/exposures', operator)
      .set('content-type', 'application/x-ndjson')
      .set('idempotency-key', 'k')
      .send('{}');
    expect(keyed.status).toBe(400);
  });
});

describe('what was delivered', () => {
  it('is restated by a calibration that comes late, and stays readable as it was known', async () => {
    const { location } = (await log(exposure(deviceId, 'a'))).headers;
    const before = (await clinic.get(location)).body.item;
    expect(before).toMatchObject({ deliveredFluenceJPerCm2: 8, calibration: { basis: 'not-calibrated' }, restated: false });
    const then = new Date(clinic.clock.ms).toISOString();
    clinic.clock.ms += 60_000;
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(1.5, '2026-02-10T08:00:00Z'));
    const after = (await clinic.get(location)).body.item;
    expect(after.deliveredFluenceJPerCm2).toBeCloseTo(12, 9);
    expect(after).toMatchObject({ restated: true, asFirstRecorded: { deliveredFluenceJPerCm2: 8 } });
    expect((await clinic.get(`${location}?asOf=${then}`)).body.item).toEqual(before);
    expect((await clinic.get(`/v1/exposures?asOf=${then}`)).body.items[0]).toEqual(before);
    const overdose = (await clinic.get('/v1/alerts?rule=overdose')).body.items;
    expect(overdose).toHaveLength(1);
    expect(overdose[0].evidence.verdict).toBe('likely');
  });

  it('uses the calibration in force at its own time', async () => {
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(1, '2026-01-10T08:00:00Z'));
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(0.9, '2026-02-15T08:00:00Z'));
    const at = (time: string) => log(exposure(deviceId, time, { at: time }));
    expect((await at('2026-02-14T08:00:00Z')).body.item.deliveredFluenceJPerCm2).toBeCloseTo(8, 9);
    expect((await at('2026-02-16T08:00:00Z')).body.item.deliveredFluenceJPerCm2).toBeCloseTo(7.2, 9);
    const early = (await at('2026-01-01T08:00:00Z')).body.item;
    expect(rules(early.alerts)).toEqual(['calibration-lapsed']);
  });

  it('widens when the calibration has lapsed, and keeps its value', async () => {
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(1.1, '2024-02-02T08:00:00Z'));
    const fresh = (await log(exposure(deviceId, 'a', { at: '2024-03-01T08:00:00Z' }))).body.item;
    const lapsed = (await log(exposure(deviceId, 'b', { at: '2026-02-20T08:00:00Z' }))).body.item;
    expect(lapsed.deliveredFluenceJPerCm2).toBe(fresh.deliveredFluenceJPerCm2);
    expect(lapsed.highJPerCm2).toBeGreaterThan(fresh.highJPerCm2);
    expect(rules(lapsed.alerts)).toContain('calibration-lapsed');
  });

  it('rests on nothing between a service and the next calibration', async () => {
    await added(clinic, `/v1/devices/${deviceId}/calibrations`, calibration(1.1));
    await added(clinic, `/v1/devices/${deviceId}/services`, {
      performedAt: '2026-02-10T08:00:00Z',
      kind: 'repair',
      description: 'dye replaced',
      by: 'E-1',
    });
    const item = (await log(exposure(deviceId, 'a'))).body.item;
    expect(item.deliveredFluenceJPerCm2).toBe(8);
    expect(item.alerts[0]).toMatchObject({ rule: 'calibration-lapsed', text: expect.stringContaining('service') });
  });
});

describe('the log', () => {
  beforeEach(async () => {
    const at = [
      '2026-02-01T08:00:00Z',
      '2026-02-02T08:00:00Z',
      '2026-02-02T08:00:00Z',
      '2026-02-02T08:00:00Z',
      '2026-02-03T08:00:00Z',
    ];
    await log({ items: at.map((time, i) => exposure(deviceId, `e${i}`, { at: time, operator: i === 0 ? '=1+1' : 'OP-1' })) });
  });

  it('pages without skipping equal times', async () => {
    const seen: string[] = [];
    let path: string | undefined = '/v1/exposures?limit=2';
    while (path) {
      const reply = await clinic.get(path);
      seen.push(...reply.body.items.map((item: { externalId: string }) => item.externalId));
      path = /<([^>]+)>/.exec(reply.headers.link ?? '')?.[1];
    }
    expect(seen).toEqual(['e0', 'e1', 'e2', 'e3', 'e4']);
  });

  it('is filtered by time and device', async () => {
    const read = async (query: string) => (await clinic.get(`/v1/exposures?${query}`)).body.items.length;
    expect(await read('from=2026-02-02T08:00:00Z&to=2026-02-03T08:00:00Z')).toBe(3);
    expect(await read(`deviceId=${deviceId}&from=2026-02-03T08:00:00Z`)).toBe(1);
    expect(await read('courseId=none')).toBe(0);
    expect((await clinic.get('/v1/exposures?device=x')).status).toBe(400);
    expect((await clinic.get('/v1/exposures?cursor=x')).status).toBe(400);
  });

  it('streams as CSV with formulas made harmless, and as NDJSON', async () => {
    const csv = await clinic.get('/v1/exposures').set('accept', 'text/csv');
    expect(csv.headers['content-type']).toContain('text/csv');
    const rows = csv.text.trim().split('\r\n');
    expect(rows).toHaveLength(6);
    expect(rows[1]).toContain("'=1+1");
    const lines = (
      await clinic
        .get('/v1/exposures')
        .set('accept', 'application/x-ndjson')
        .buffer(true)
        .parse(asText as never)
    ).body
      .trim()
      .split('\n');
    expect(lines.map((line: string) => JSON.parse(line).externalId)).toEqual(['e0', 'e1', 'e2', 'e3', 'e4']);
    expect((await clinic.get('/v1/exposures').set('accept', 'image/png')).status).toBe(406);
  });
});

function asText(reply: NodeJS.ReadableStream, done: (error: Error | null, text: string) => void): void {
  let text = '';
  reply.on('data', (chunk) => {
    text += String(chunk);
  });
  reply.on('end', () => done(null, text));
}

describe('corrections', () => {
  it('lay the right value over the wrong one; both stay readable', async () => {
    const { location } = (await log(exposure(deviceId, 'a', { spot: { shape: 'circle', diameterMm: 12 } }))).headers;
    const then = new Date(clinic.clock.ms).toISOString();
    clinic.clock.ms += 1000;
    const correction = { reason: 'read from the wrong handpiece', changes: { spot: spot7 } };
    const made = await clinic.post(`${location}/corrections`, correction, operator);
    expect(made.status).toBe(201);
    const item = (await clinic.get(location)).body.item;
    expect(item).toMatchObject({ status: 'corrected', corrections: 1, spot: spot7 });
    expect((await clinic.get(`${location}?asOf=${then}`)).body.item).toMatchObject({
      status: 'stored',
      spot: { diameterMm: 12 },
    });
    expect((await clinic.get(`${location}/corrections`)).body.items).toHaveLength(1);
    expect((await clinic.get(made.headers.location)).body.item.reason).toBe(correction.reason);
  });

  it('can say that it never happened, and then no more', async () => {
    const { location } = (await log(exposure(deviceId, 'a'))).headers;
    const inError = { reason: 'test shot', enteredInError: true };
    expect((await clinic.post(`${location}/corrections`, inError, operator)).status).toBe(201);
    expect((await clinic.get(location)).body.item.status).toBe('entered-in-error');
    expect((await clinic.post(`${location}/corrections`, inError, operator)).status).toBe(409);
  });

  it.each([
    ['no reason', { changes: { pulseCount: 2 } }],
    ['nothing changed', { reason: 'why not' }],
    ['another device', { reason: 'moved', changes: { deviceId: 'x' } }],
    ['an impossible record', { reason: 'stack', changes: { stackCount: 9 } }],
    ['an unknown protocol', { reason: 'protocol', changes: { protocolId: 'x' } }],
  ])('with %s are refused and leave nothing', async (_what, body) => {
    const { location } = (await log(exposure(deviceId, 'a'))).headers;
    expect((await clinic.post(`${location}/corrections`, body, operator)).status).toBe(422);
    expect((await clinic.get(`${location}/corrections`)).body.items).toEqual([]);
  });

  it('are not offered by DELETE, and not to readers', async () => {
    const { location } = (await log(exposure(deviceId, 'a'))).headers;
    expect((await clinic.call('delete', location, { role: 'administrator' })).status).toBe(405);
    expect((await clinic.post(`${location}/corrections`, {}, { role: 'reader' })).status).toBe(403);
    expect((await clinic.post('/v1/exposures', exposure(deviceId, 'b'), { role: 'reader' })).status).toBe(403);
  });
});

describe('rules', () => {
  it('hold settings against the version of the protocol in force at the time', async () => {
    const protocolId = await added(clinic, '/v1/protocols', protocol);
    const strong = (externalId: string) => log(exposure(deviceId, externalId, { protocolId, set: { fluenceJPerCm2: 9.5 } }));
    expect(rules((await strong('a')).body.item.alerts)).toContain('outside-protocol');
    await added(clinic, `/v1/protocols/${protocolId}/approvals`, {}, { role: 'physicist', person: 2 });
    const { alerts } = (await strong('b')).body.item;
    expect(alerts[0]).toMatchObject({
      rule: 'outside-protocol',
      severity: 'high',
      text: expect.stringContaining('fluenceJPerCm2 9.5 (max 9)'),
    });
    const wider = {
      ...protocol,
      envelopes: [{ ...protocol.envelopes[0], fluenceMaxJPerCm2: 30 }],
      effectiveFrom: '2026-02-25T00:00:00Z',
    };
    const put = await clinic
      .call('put', `/v1/protocols/${protocolId}`, { role: 'physicist' })
      .set('if-match', '"v1"')
      .send(wider);
    expect(put.body.item).toMatchObject({ version: 2, approved: false, versionInForce: 1 });
    await added(clinic, `/v1/protocols/${protocolId}/approvals`, {}, { role: 'physicist', person: 2 });
    expect(rules((await strong('c')).body.item.alerts)).toContain('outside-protocol');
    const later = await log(exposure(deviceId, 'd', { protocolId, set: { fluenceJPerCm2: 9.5 }, at: '2026-02-26T10:00:00Z' }));
    expect(rules(later.body.item.alerts)).not.toContain('outside-protocol');
  });

  it('decide on overdose by what was delivered, not by the panel', async () => {
    const protocolId = await added(clinic, '/v1/protocols', protocol);
    await added(clinic, `/v1/protocols/${protocolId}/approvals`, {}, { role: 'physicist', person: 2 });
    const verdicts: string[] = [];
    for (const factor of [0.9, 1.1, 1.5]) {
      const device = await added(clinic, '/v1/devices', dyeLaser);
      await added(clinic, `/v1/devices/${device}/calibrations`, calibration(factor));
      const { alerts } = (await log(exposure(device, 'a', { protocolId }))).body.item as {
        alerts: { rule: string; id: string }[];
      };
      const alert = alerts.find(({ rule }) => rule === 'overdose');
      verdicts.push(alert ? (await clinic.get(`/v1/alerts/${alert.id}`)).body.item.evidence.verdict : 'unlikely');
    }
    expect(verdicts).toEqual(['unlikely', 'possible', 'likely']);
  });

  it('look back over a course: interval and passes', async () => {
    const courseId = await added(clinic, '/v1/courses', course, operator);
    const at = async (externalId: string, time: string, more: object = {}) =>
      rules((await log(exposure(deviceId, externalId, { courseId, at: time, ...more }))).body.item.alerts);
    expect(await at('a', '2026-02-01T08:00:00Z')).not.toContain('short-interval');
    expect(await at('b', '2026-02-01T08:10:00Z', { passNumber: 2 })).toContain('double-pass');
    expect(await at('c', '2026-02-01T08:11:00Z')).toEqual(['calibration-lapsed']);
    expect(await at('d', '2026-02-04T08:00:00Z')).toContain('short-interval');
    expect(await at('e', '2026-02-27T08:00:00Z')).not.toContain('short-interval');
    const { bookkeeping } = (await clinic.get(`/v1/courses/${courseId}`)).body.item;
    expect(bookkeeping).toMatchObject({ exposures: 5, pulses: 5, note: expect.stringContaining('bookkeeping') });
    expect(bookkeeping.visits.map((visit: { exposures: number }) => visit.exposures)).toEqual([3, 1, 1]);
  });

  it('name numbers that do not agree', async () => {
    const cases: [object, string][] = [
      [{ set: { fluenceJPerCm2: 80_000, pulseEnergyJ: 8 * area7Cm2 } }, 'J/m2'],
      [{ set: { fluenceJPerCm2: 8, pulseEnergyJ: 8000 * area7Cm2 } }, 'mJ'],
      [{ set: { fluenceJPerCm2: 8, pulseEnergyJ: 32 * area7Cm2 } }, 'radius'],
      [{ set: { fluenceJPerCm2: 8, pulseEnergyJ: 80 * area7Cm2 }, pulseCount: 10 }, 'all pulses'],
      [{ set: { fluenceJPerCm2: 80_000 } }, 'J/m2'],
      [{ set: { pulseEnergyJ: 3000 } }, 'mJ'],
    ];
    for (const [i, [more, words]] of cases.entries()) {
      const { alerts } = (await log(exposure(deviceId, `n${i}`, more))).body.item as { alerts: { rule: string; text: string }[] };
      expect(alerts.find(({ rule }) => rule === 'inconsistent-numbers')?.text, words).toContain(words);
    }
  });

  it('never refuse what was done: wrong wavelength, spot and handpiece are stored with alerts', async () => {
    const device = await added(clinic, '/v1/devices', { ...dyeLaser, handpieces: [{ name: 'small', spots: [spot7] }] });
    const wrong = async (externalId: string, more: object) =>
      rules((await log(exposure(device, externalId, more))).body.item.alerts);
    expect(await wrong('a', { wavelengthNm: 1064 })).toContain('wrong-wavelength');
    expect(await wrong('b', { handpiece: 'small', spot: { shape: 'circle', diameterMm: 10 } })).toContain('wrong-spot');
    expect(await wrong('c', { handpiece: 'large' })).toContain('wrong-spot');
    expect(await wrong('d', { pulse: { durationS: 0.5 } })).toContain('outside-device');
  });
});
