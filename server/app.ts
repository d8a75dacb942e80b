import compression from 'compression';
import express, { type Express, type Router } from 'express';
import helmet from 'helmet';
import { pinoHttp } from 'pino-http';
import { v7 as uuidv7 } from 'uuid';
import { campaignRoutes } from './routes/campaigns.ts';
import { captureDataRoutes } from './routes/capture-data.ts';
import { captureRoutes } from './routes/captures.ts';
import { clientFiles } from './routes/client-files.ts';
import { problemDocuments, unknownPath } from './routes/errors.ts';
import { estimateRoutes } from './routes/estimates.ts';
import { eventRoutes } from './routes/events.ts';
import { healthRoutes } from './routes/health.ts';
import { identify, sameOriginOnly, sessions } from './routes/identity.ts';
import { sessionRoutes } from './routes/session.ts';
import { tokenRoutes } from './routes/tokens.ts';
import type { Context } from './services/context.ts';

/** Every resource's routes; all but health ask who is there. */
export function resourceRoutes(context: Context): Router[] {
  return [
    sessionRoutes(context),
    tokenRoutes(context),
    campaignRoutes(context),
    captureRoutes(context),
    captureDataRoutes(context),
    estimateRoutes(context),
    eventRoutes(context),
  ];
}

function securityHeaders(secure: boolean) {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'", 'data:'],
        connectSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    strictTransportSecurity: secure,
    xFrameOptions: { action: 'deny' },
    referrerPolicy: { policy: 'same-origin' },
  });
}

/** The web application: logging, headers, static files and health first, then session, routes and errors. */
export function createApp(context: Context): Express {
  const { config, log } = context;
  const app = express();
  app.set('trust proxy', config.trustProxy);
  app.set('query parser', 'simple');
  app.disable('x-powered-by');
  app.use(
    pinoHttp({
      logger: log,
      genReqId: (_request, response) => {
        const id = uuidv7();
        response.setHeader('X-Request-Id', id);
        return id;
      },
      customLogLevel: (_request, response, error) => (error || response.statusCode >= 500 ? 'warn' : 'debug'),
      redact: ['req.headers.authorization', 'req.headers.cookie', 'res.headers["set-cookie"]'],
      serializers: {
        req: ({ id, method, url }: { id: string; method: string; url: string }) => ({ id, method, url }),
      },
    }),
  );
  app.use(securityHeaders(config.secureCookies));
  app.use(
    compression({
      filter: (_request, response) => /json|text\/html/.test(String(response.getHeader('Content-Type'))),
    }),
  );
  app.use(healthRoutes(context));
  app.use(clientFiles(config.clientFolder));
  app.use('/api', (_request, response, next) => {
    response.set('Cache-Control', 'private, no-cache');
    next();
  });
  app.use(sameOriginOnly, sessions(context), identify(context), express.json({ limit: '1mb' }));
  app.use(...resourceRoutes(context));
  app.use(unknownPath);
  app.use(problemDocuments(log));
  return app;
}
