import helmet from '@fastify/helmet';
import multipart from '@fastify/multipart';
import swagger from '@fastify/swagger';
import fastify, { type FastifyBaseLogger } from 'fastify';
import { jsonSchemaTransform, jsonSchemaTransformObject } from 'fastify-type-provider-zod';
import type { z } from 'zod';
import { answerErrors } from './http/errors.ts';
import { refuseForeigners } from './http/loopback.ts';
import { type PlaceOfPage, servePage } from './http/page.ts';
import { parseOrRefuse } from './http/requestInvalid.ts';
import { classifyRoutes } from './routes/classify.ts';
import { exportRoutes } from './routes/exports.ts';
import { laboratoryRoutes } from './routes/laboratory.ts';
import { logRoutes } from './routes/logs.ts';
import { measuringRoutes } from './routes/measuring.ts';
import { photoRoutes } from './routes/photos.ts';
import { readingRoutes } from './routes/readings.ts';
import { reportRoutes } from './routes/reports.ts';
import type { TypedApp } from './routes/route.ts';
import { testRoutes } from './routes/tests.ts';
import type { Service } from './service.ts';

/** Nothing is loaded from elsewhere, nothing stands inline in the page; `blob:` is a photo just chosen, shown before it is sent. */
const CONTENT_SECURITY = {
  useDefaults: false,
  directives: {
    defaultSrc: ["'none'"],
    scriptSrc: ["'self'"],
    styleSrc: ["'self'"],
    imgSrc: ["'self'", 'blob:'],
    fontSrc: ["'self'"],
    connectSrc: ["'self'"],
    manifestSrc: ["'self'"],
    formAction: ["'self'"],
    baseUri: ["'none'"],
    frameAncestors: ["'none'"],
  },
};

/** The service as an application that does not listen yet: `serve` listens, tests ask it directly. */
export async function buildApp(service: Service, logger?: FastifyBaseLogger): Promise<TypedApp> {
  const options = {
    bodyLimit: service.limits.bodyBytes,
    // Photos may come slowly; a connection that sends nothing at all is ended.
    connectionTimeout: 0,
    requestTimeout: 0,
    keepAliveTimeout: 5000,
    forceCloseConnections: 'idle' as const,
    routerOptions: { maxParamLength: 200 },
  };
  const app: TypedApp = fastify(logger ? { ...options, loggerInstance: logger } : options);

  app.setValidatorCompiler<z.ZodType>(({ schema, httpPart }) => (data) => {
    try {
      return { value: parseOrRefuse(schema, data, httpPart ?? 'request') };
    } catch (error) {
      return { error: error instanceof Error ? error : new Error(String(error)) };
    }
  });
  // What is answered is made by typed code; the tests hold it against the schemas.
  app.setSerializerCompiler(() => (data) => JSON.stringify(data));

  refuseForeigners(app);
  await app.register(helmet, {
    contentSecurityPolicy: CONTENT_SECURITY,
    crossOriginEmbedderPolicy: false,
    strictTransportSecurity: false,
    referrerPolicy: { policy: 'no-referrer' },
    xFrameOptions: { action: 'deny' },
  });
  app.addHook('onSend', async (request, reply) => {
    if (request.url.startsWith('/api/') && !reply.hasHeader('cache-control')) reply.header('cache-control', 'no-store');
  });
  await app.register(multipart);
  await app.register(swagger, {
    openapi: {
      openapi: '3.1.0',
      info: {
        title: 'Breakplane',
        version: service.version,
        description:
          'Tests of torsion specimens: loads, photos, readings of the plane angle, failure mode. Lengths in mm, torque in N·m, forces in N, stresses in MPa, angles in degrees. Errors are problem details as in RFC 9457.',
      },
    },
    transform: jsonSchemaTransform,
    transformObject: jsonSchemaTransformObject,
  });
  let placeOf: (path: string) => PlaceOfPage = () => 'none';
  answerErrors(app, (path) => placeOf(path));
  placeOf = await servePage(app, service.programDir);
  laboratoryRoutes(app, service);
  testRoutes(app, service);
  photoRoutes(app, service);
  readingRoutes(app, service);
  classifyRoutes(app);
  logRoutes(app, service);
  measuringRoutes(app, service);
  exportRoutes(app, service);
  reportRoutes(app, service);
  await app.ready();
  return app;
}
