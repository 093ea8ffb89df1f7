import rateLimit from '@fastify/rate-limit';
import fastify, { LogController } from 'fastify';
import { serializerCompiler, type ZodTypeProvider } from 'fastify-type-provider-zod';
import { uuidv7 } from 'uuidv7';
import { registerAlertsRoutes } from './api/alerts/alerts.routes.js';
import { registerAuditRoutes } from './api/audit/audit.routes.js';
import { registerCalibrationsRoutes } from './api/calibrations/calibrations.routes.js';
import { registerChecksRoutes } from './api/checks/checks.routes.js';
import { registerChromophoresRoutes } from './api/chromophores/chromophores.routes.js';
import { registerClinicsRoutes } from './api/clinics/clinics.routes.js';
import { registerCoursesRoutes } from './api/courses/courses.routes.js';
import { registerCoverageRoutes } from './api/coverage/coverage.routes.js';
import { registerDevicesRoutes } from './api/devices/devices.routes.js';
import { registerExposureRoutes } from './api/exposure/exposure.routes.js';
import { registerExposuresRoutes } from './api/exposures/exposures.routes.js';
import { registerFluenceRoutes } from './api/fluence/fluence.routes.js';
import { registerKeysRoutes } from './api/keys/keys.routes.js';
import { openKeyStore } from './api/keys/keys.store.js';
import { registerLaserMediaRoutes } from './api/laser-media/laser-media.routes.js';
import { registerLightRoutes } from './api/light/light.routes.js';
import { registerMetersRoutes } from './api/meters/meters.routes.js';
import { registerProtocolsRoutes } from './api/protocols/protocols.routes.js';
import { registerRankingsRoutes } from './api/rankings/rankings.routes.js';
import { registerReferenceRunsRoutes } from './api/reference-runs/reference-runs.routes.js';
import { registerServiceRoutes } from './api/service/service.routes.js';
import { registerServicesRoutes } from './api/services/services.routes.js';
import { registerThermalRoutes } from './api/thermal/thermal.routes.js';
import { registerTissueOpticsRoutes } from './api/tissue-optics/tissue-optics.routes.js';
import { openReplyShelf } from './db/idempotent-replies.store.js';
import { installAuthentication } from './http/actor.js';
import type { App } from './http/app-type.js';
import { answerBrokenConnection } from './http/broken-connection.js';
import { installHooks } from './http/hooks.js';
import { installIdempotency } from './http/idempotency.js';
import { installOpenApi } from './http/openapi.js';
import { installProblems } from './http/problems.js';
import { validatorCompiler } from './http/validation.js';
import type { Parts } from './parts.js';

/** Settings and parts become an app. The rooms below are all there are; a bench may add a yardstick beside them. */
export async function buildApp(parts: Parts, addBeside: (app: App) => void = () => {}): Promise<App> {
  const app = fastify({
    loggerInstance: parts.log,
    logController: new LogController({ disableRequestLogging: true }),
    genReqId: () => uuidv7(),
    bodyLimit: parts.config.bodyLimitBytes,
    routerOptions: { caseSensitive: true, ignoreTrailingSlash: false, maxParamLength: 200 },
    exposeHeadRoutes: true,
    forceCloseConnections: 'idle',
    clientErrorHandler: answerBrokenConnection,
    onProtoPoisoning: 'error',
    onConstructorPoisoning: 'error',
  }).withTypeProvider<ZodTypeProvider>();
  app.removeContentTypeParser('text/plain');
  app.setValidatorCompiler(validatorCompiler);
  app.setSerializerCompiler(serializerCompiler);
  installProblems(app);
  installHooks(app);
  const keys = openKeyStore(parts.db);
  installAuthentication(app, keys.findActor);
  await app.register(rateLimit, {
    max: parts.config.rateLimitPerMinute,
    timeWindow: 60_000,
    hook: 'preParsing',
    enableDraftSpec: true,
    keyGenerator: (request) => request.actor?.keyId ?? request.ip,
  });
  installIdempotency(app, openReplyShelf(parts.db, parts.now));
  app.addHook('onResponse', (request, reply, done) => {
    const route = request.routeOptions.url ?? 'unknown';
    request.log.debug({ method: request.method, route, status: reply.statusCode, ms: Math.round(reply.elapsedTime) }, 'answered');
    done();
  });
  await installOpenApi(app);

  registerServiceRoutes(app, parts);
  registerClinicsRoutes(app, parts);
  registerServicesRoutes(app, parts);
  registerProtocolsRoutes(app, parts);
  registerMetersRoutes(app, parts);
  registerExposuresRoutes(app, parts);
  registerDevicesRoutes(app, parts);
  registerCoursesRoutes(app, parts);
  registerChecksRoutes(app, parts);
  registerCalibrationsRoutes(app, parts);
  registerAuditRoutes(app, parts);
  registerAlertsRoutes(app, parts);
  registerKeysRoutes(app, parts, keys);
  registerThermalRoutes(app, parts);
  registerFluenceRoutes(app, parts);
  registerCoverageRoutes(app, parts);
  registerLightRoutes(app, parts);
  registerExposureRoutes(app, parts);
  registerRankingsRoutes(app, parts);
  registerReferenceRunsRoutes(app, parts);
  registerChromophoresRoutes(app, parts);
  registerTissueOpticsRoutes(app, parts);
  registerLaserMediaRoutes(app, parts);

  addBeside(app);
  await app.ready();
  return app;
}
