import swagger from '@fastify/swagger';
import swaggerUi from '@fastify/swagger-ui';
import { jsonSchemaTransform, jsonSchemaTransformObject } from 'fastify-type-provider-zod';
import { bannerText } from '../clinical-banner.js';
import { serviceVersion } from '../version.js';
import type { App } from './app-type.js';

const description = `${bannerText}

Ranks the wavelengths, pulse durations and spots of a practice's own lasers for a target chromophore, turns panel settings into the fluence that
reached the skin, and keeps calibrations and the device log. Pulse durations are full widths at half maximum; energies are per
pulse at the skin unless the name says otherwise; a flat-top's diameter is its edge, a Gaussian's is 1/e2. Exposure limits protect bystanders and
staff and do not apply to the intended treatment site. Not a cleared medical device.`;

// A beam on three layers; our own.
const mark =
  '<svg xmlns="http://www.w3.org/2000/svg" width="16" height="16" viewBox="0 0 16 16"><path fill="#8a4b08" d="M6 0h4v7H6z"/><path fill="#1c2321" d="M0 8h16v2H0zM0 11h16v1H0zM0 13h16v1H0z"/></svg>';

/** The OpenAPI 3.1 document from the schemas, and its reference page, which loads nothing from outside. */
export async function installOpenApi(app: App): Promise<void> {
  await app.register(swagger, {
    openapi: {
      openapi: '3.1.1',
      info: {
        title: 'Fluence Ledger',
        version: serviceVersion.split(' ')[1]!,
        description,
        license: { name: 'Apache-2.0', identifier: 'Apache-2.0' },
      },
      servers: [{ url: '/' }],
      components: { securitySchemes: { key: { type: 'http', scheme: 'bearer' } } },
      security: [{ key: [] }],
    },
    transform: jsonSchemaTransform,
    transformObject: jsonSchemaTransformObject,
  });
  await app.register(swaggerUi, {
    routePrefix: '/docs',
    logo: { type: 'image/svg+xml', content: Buffer.from(mark) },
    theme: {
      title: 'Fluence Ledger',
      css: [{ filename: 'page.css', content: '.swagger-ui .topbar{display:none}' }],
      favicon: [{ filename: 'mark.svg', rel: 'icon', type: 'image/svg+xml', sizes: '16x16', content: mark }],
    },
    staticCSP:
      "default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; font-src 'self'; connect-src 'self'; frame-ancestors 'none'",
    uiConfig: { deepLinking: true, docExpansion: 'list', tryItOutEnabled: false, validatorUrl: null },
  });
  app.get('/openapi.json', { schema: { hide: true } }, async (_request, reply) => {
    return reply.type('application/json; charset=utf-8').send(JSON.stringify(app.swagger()));
  });
}
