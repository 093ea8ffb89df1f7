import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openTestService } from '../support/service.js';

type Service = Awaited<ReturnType<typeof openTestService>>;

interface Operation {
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  readonly path: string;
}

describe('conventions of every route', () => {
  let service: Service;
  let operations: Operation[];
  beforeAll(async () => {
    service = await openTestService();
    const document = JSON.parse((await service.get('/openapi.json').expect(200)).text) as { paths: Record<string, object> };
    operations = Object.entries(document.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => ({
        method: method as Operation['method'],
        path: path.replaceAll(/\{\w+\}/g, 'nobody'),
      })),
    );
  });
  afterAll(() => service.close());

  const call = (operation: Operation, headers: Record<string, string>, payload?: string) =>
    service.app.inject({
      method: operation.method,
      url: operation.path,
      headers,
      ...(payload === undefined ? {} : { payload }),
    } as never) as unknown as Promise<{
      statusCode: number;
      headers: Record<string, string>;
      body: string;
    }>;

  it('the document is OpenAPI 3.1 with the banner in its description and no member that the standard lacks', async () => {
    const document = (await service.get('/openapi.json')).body;
    expect(document.openapi).toMatch(/^3\.1\./);
    expect(document.info.description).toContain('Licensed clinical judgment');
    expect(document).not.toHaveProperty('banner');
    expect(operations.length).toBeGreaterThan(20);
  });

  it('without a key: 401 or an open route, always with the banner in the header, and in JSON in the body', async () => {
    for (const operation of operations) {
      const reply = await call(
        operation,
        operation.method === 'get' ? {} : { 'content-type': 'application/json' },
        operation.method === 'get' ? undefined : '{}',
      );
      expect(reply.headers['clinical-banner'], operation.path).toBe('licensed clinical judgment governs');
      const open = operation.path.startsWith('/health');
      expect(reply.statusCode, operation.path).toBe(open ? 200 : 401);
      expect((JSON.parse(reply.body) as { banner: string }).banner, operation.path).toContain('Licensed clinical judgment');
    }
  });

  it('broken JSON is 400 and an unknown field 422, each a problem document with the banner', async () => {
    const administrator = service.as('administrator');
    for (const operation of operations.filter(({ method }) => method === 'post')) {
      const broken = await call(operation, { ...administrator, 'content-type': 'application/json' }, '{"a":');
      expect([400, 404, 403], operation.path).toContain(broken.statusCode);
      const unknown = await call(operation, { ...administrator, 'content-type': 'application/json' }, '{"noSuchField":NaN}');
      expect([400, 404, 403], operation.path).toContain(unknown.statusCode);
      const extra = await call(operation, { ...administrator, 'content-type': 'application/json' }, '{"noSuchField":1}');
      // 409: a route without a body, in a clinic that has nothing to sign yet.
      expect([422, 404, 403, 409], operation.path).toContain(extra.statusCode);
      for (const reply of [broken, extra]) {
        expect(reply.headers['content-type']).toContain('application/problem+json');
        expect((JSON.parse(reply.body) as { type: string; banner: string }).type).toMatch(/^\/problems\//);
      }
    }
  });

  it('an unknown query parameter is 400 on every list and document of data', async () => {
    const administrator = service.as('administrator');
    const lists = operations.filter(
      ({ method, path }) => method === 'get' && path.startsWith('/v1/') && !path.includes('nobody'),
    );
    expect(lists.length).toBeGreaterThan(3);
    for (const operation of lists) {
      const reply = await call({ ...operation, path: `${operation.path}?noSuchParameter=1` }, administrator);
      expect(reply.statusCode, operation.path).toBe(400);
      expect(JSON.stringify(JSON.parse(reply.body)), operation.path).toContain('?noSuchParameter');
    }
  });

  it('role by route: a reader never gets past routes of higher roles', async () => {
    const reader = service.as('reader');
    const keyRoutes = operations.filter(({ path }) => path.startsWith('/v1/keys'));
    expect(keyRoutes.length).toBe(4);
    for (const operation of keyRoutes) expect((await call(operation, reader)).statusCode, operation.path).toBe(403);
  });

  it.each([
    ['a wrong method', 'DELETE', '/v1/rankings', {}, undefined, 405],
    ['an unknown path', 'GET', '/v1/nothing', {}, undefined, 404],
    ['an unacceptable media type', 'GET', '/v1/laser-media', { accept: 'image/png' }, undefined, 406],
    ['a wrong media type', 'POST', '/v1/rankings', { 'content-type': 'text/plain' }, 'x', 415],
    ['a body of 10 MB', 'POST', '/v1/rankings', { 'content-type': 'application/json' }, `{"a":"${'x'.repeat(10_000_000)}"}`, 413],
    ['a poisoned prototype', 'POST', '/v1/rankings', { 'content-type': 'application/json' }, '{"__proto__":{"x":1}}', 400],
    [
      'deep nesting',
      'POST',
      '/v1/rankings',
      { 'content-type': 'application/json' },
      `${'['.repeat(50_000)}${']'.repeat(50_000)}`,
      422,
    ],
    ['an empty body', 'POST', '/v1/rankings', { 'content-type': 'application/json' }, '', 400],
  ])('%s is answered as a problem', async (_what, method, url, headers, payload, status) => {
    const reply = (await service.app.inject({
      method,
      url,
      headers: { ...service.as('reader'), ...headers },
      ...(payload === undefined ? {} : { payload }),
    } as never)) as unknown as { statusCode: number; headers: Record<string, string> };
    expect(reply.statusCode).toBe(status);
    expect(reply.headers['content-type']).toContain('application/problem+json');
    expect(reply.headers['clinical-banner']).toBe('licensed clinical judgment governs');
    if (status === 405) expect(reply.headers.allow).toContain('POST');
  });

  it('the reference page and its parts come from here and name no other host', async () => {
    const page = await service.app.inject({ method: 'GET', url: '/docs/' });
    expect(page.statusCode).toBe(200);
    expect(page.headers['clinical-banner']).toBe('licensed clinical judgment governs');
    expect(page.body).not.toMatch(/(src|href)="https?:/);
  });

  it('every kind of problem has its page', async () => {
    for (const code of ['malformed', 'invalid-request', 'out-of-range', 'disk-full', 'too-many-requests']) {
      const page = await service.app.inject({ method: 'GET', url: `/problems/${code}`, headers: { accept: 'text/html' } });
      expect(page.statusCode).toBe(200);
      expect(page.body).toContain('Licensed clinical judgment');
    }
  });
});
