import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

type Service = Awaited<ReturnType<typeof openTestService>>;

describe('/v1/keys', () => {
  let service: Service;
  beforeAll(async () => {
    service = await openTestService();
  });
  afterAll(() => service.close());

  it('makes a key that works at once, shows its secret once, stores it hashed, and revokes it', async () => {
    const made = await service.post('/v1/keys', { label: 'planning desk', role: 'reader' }, 'administrator').expect(201);
    const { id, secret } = made.body.item;
    expect(made.headers.location).toBe(`/v1/keys/${id}`);
    const authorization = `Bearer ${secret}`;
    const ask = () => service.app.inject({ method: 'GET', url: '/v1/laser-media', headers: { authorization } });
    expect((await ask()).statusCode).toBe(200);
    const listed = await service.get('/v1/keys', 'administrator').expect(200);
    expect(JSON.stringify(listed.body)).not.toContain(secret);
    const row = service.parts.db.prepare('SELECT * FROM api_keys WHERE id = ?').get(id);
    expect(JSON.stringify(row)).not.toContain(secret);
    const revoked = await service.app.inject({ method: 'DELETE', url: `/v1/keys/${id}`, headers: service.as('administrator') });
    expect(revoked.statusCode).toBe(204);
    expect((await ask()).statusCode).toBe(401);
  });

  it('pages through keys without skipping any', async () => {
    for (let i = 0; i < 5; i++)
      await service.post('/v1/keys', { label: `key ${i}`, role: 'operator' }, 'administrator').expect(201);
    const seen: string[] = [];
    let next: string | null = null;
    do {
      const page: { body: { items: { id: string }[]; next: string | null } } = await service
        .get(`/v1/keys?limit=2${next ? `&cursor=${next}` : ''}`, 'administrator')
        .expect(200);
      seen.push(...page.body.items.map(({ id }) => id));
      next = page.body.next;
    } while (next !== null);
    expect(new Set(seen).size).toBe(seen.length);
    expect(seen.length).toBeGreaterThanOrEqual(9);
  });

  it('keys of another clinic are not there, and the last administrator key stays', async () => {
    await service.get('/v1/keys/south-reader', 'administrator').expect(404);
    const last = await service.app.inject({
      method: 'DELETE',
      url: '/v1/keys/north-administrator',
      headers: service.as('administrator'),
    });
    expect(last.statusCode).toBe(409);
  });
});
