import { join } from 'node:path';
import compression from 'compression';
import cookieParser from 'cookie-parser';
import express, { type Express, type RequestHandler, type Router } from 'express';
import helmet from 'helmet';
import type { Logger } from 'pino';
import { pinoHttp } from 'pino-http';
import { errorHandler, noSuchAddress } from './http/error-handler.ts';
import type { Once } from './http/idempotency.ts';
import { limitAll, type Limits } from './http/limits.ts';
import { clientPages, docsPages } from './http/pages.ts';
import { requestId } from './http/request-id.ts';

export interface AppParts {
  log: Logger;
  publicUrl: string;
  isProduction: boolean;
  trustedProxies: number;
  limits: Limits;
  signInCheck: RequestHandler;
  csrfCheck: RequestHandler;
  once: Once;
  isHealthy: () => Promise<boolean>;
  /** Routers that read the body's raw bytes; before any parser. */
  rawRouters: Router[];
  /** One a feature, each under /api/v1. */
  routers: Router[];
  /** Pages of local stand-ins. */
  devRouters: Router[];
  webFolder: string;
}

const API_PATH = '/api/v1';
/** A track or a mapping is text of some hundred kilobytes; portfolio files come as multipart and are streamed. */
const JSON_LIMIT = '4mb';

const securityHeaders = (isProduction: boolean) =>
  helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: [`'none'`],
        scriptSrc: [`'self'`],
        styleSrc: [`'self'`],
        imgSrc: [`'self'`, 'data:'],
        fontSrc: [`'self'`],
        connectSrc: [`'self'`],
        workerSrc: [`'self'`],
        manifestSrc: [`'self'`],
        baseUri: [`'none'`],
        formAction: [`'self'`],
        frameAncestors: [`'none'`],
      },
    },
    strictTransportSecurity: isProduction && { maxAge: 31_536_000, includeSubDomains: true },
    referrerPolicy: { policy: 'same-origin' },
  });

const requestLog = (log: Logger) =>
  pinoHttp({
    logger: log,
    genReqId: (req) => (req as unknown as { requestId: string }).requestId,
    // What went wrong is logged where it is answered.
    customLogLevel: (_req, res) => (res.statusCode >= 400 ? 'info' : 'debug'),
    serializers: {
      // Paths without their queries: a search may name a client's site.
      req: ({ id, method, url }: { id: string; method: string; url: string }) => ({
        id,
        method,
        path: url.split('?')[0],
      }),
      res: ({ statusCode }: { statusCode: number }) => ({ status: statusCode }),
    },
  });

/** The Express application: the order of its layers, and nothing of what they do. Never listens. */
export const createApp = (parts: AppParts): Express => {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', parts.trustedProxies);
  app.set('once', parts.once);

  app.use(requestId, requestLog(parts.log), securityHeaders(parts.isProduction), compression());
  app.get('/api/health', async (_req, res) => {
    const healthy = await parts.isHealthy();
    res
      .status(healthy ? 200 : 503)
      .set('Cache-Control', 'no-store')
      .json({ status: healthy ? 'ok' : 'unavailable' });
  });
  for (const router of parts.rawRouters) app.use(API_PATH, router);

  app.use(docsPages(parts.publicUrl));
  app.use(API_PATH, (_req, res, next) => {
    // The cautions in full, for whoever reads a reply without the screens around it.
    res.set('Link', `<${parts.publicUrl}/limits>; rel="terms-of-service"`);
    next();
  });
  app.use(API_PATH, limitAll(parts.limits), cookieParser(), parts.signInCheck, parts.csrfCheck);
  app.use(API_PATH, express.json({ limit: JSON_LIMIT }));
  for (const router of parts.routers) app.use(API_PATH, router);
  for (const router of parts.devRouters) app.use(router);
  app.use('/api', noSuchAddress);

  app.use(...clientPages(parts.webFolder));
  app.get('/{*path}', (_req, res) => {
    res.set('Cache-Control', 'no-cache').sendFile(join(parts.webFolder, 'index.html'));
  });
  app.use(noSuchAddress);
  app.use(errorHandler(parts.log));
  return app;
};
