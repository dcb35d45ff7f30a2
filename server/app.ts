import { existsSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import path from 'node:path';
import compression from 'compression';
import express, { Router, type Express } from 'express';
import helmet from 'helmet';
import './db/models';
import { compressedAssets } from './client';
import { env } from './env';
import { actorOf } from './features/accounts/accounts-session.service';
import { stripeWebhookRouter } from './features/finance/finance-webhook.routes';
import { fillPage, readingPage } from './features/site/site-html.service';
import { apiDocsPage, openApi } from './http/api-docs';
import { csrfGuard } from './http/csrf';
import { health } from './http/health';
import { problemHandler, unknownApi } from './http/problems';
import { requestLog } from './http/request-log';
import { whoAsks } from './http/serve';
import { introduceScopes, mountRoutes } from './routes';

const secure = env.BASE_URL.startsWith('https:');

/** Everything comes from this host: no inline script, no other origin. Styles: KaTeX and FullCalendar set style attributes. */
const policy = {
  useDefaults: false,
  directives: {
    defaultSrc: ["'self'"],
    scriptSrc: ["'self'"],
    styleSrc: ["'self'", "'unsafe-inline'"],
    imgSrc: ["'self'", 'data:', 'blob:'],
    fontSrc: ["'self'", 'data:'],
    connectSrc: ["'self'"],
    frameSrc: ["'self'", 'blob:'],
    objectSrc: ["'none'"],
    baseUri: ["'none'"],
    formAction: ["'self'"],
    frameAncestors: ["'none'"],
    ...(secure && { upgradeInsecureRequests: [] }),
  },
};

export interface AppParts {
  /** Folder of the built client; null while Vite serves it (`npm run dev`) or in API tests. */
  clientDir: string | null;
  /** Mounted instead of the built client in development. */
  devClient?: express.RequestHandler;
}

/** Builds the application. It listens to nothing by itself: tests use it without a port. */
export function buildApp({ clientDir, devClient }: AppParts): Express {
  introduceScopes();
  whoAsks.find = actorOf;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', 'loopback');
  app.set('query parser', 'simple');
  app.use(requestLog);
  app.use(
    helmet({
      contentSecurityPolicy: devClient ? false : policy,
      strictTransportSecurity: secure ? { maxAge: 31_536_000 } : false,
      crossOriginEmbedderPolicy: false,
    }),
  );
  app.use(compression());
  app.get('/api/health', health);
  app.get('/api/openapi.json', (_req, res) => void res.json(openApi()));
  app.get('/api/docs', (_req, res) => void res.type('html').send(apiDocsPage()));
  app.use(stripeWebhookRouter);
  app.use('/api', csrfGuard);
  app.use(express.json({ limit: '512kb' }));
  const router = Router();
  mountRoutes(router);
  app.use(router);
  app.use('/api', unknownApi);
  if (clientDir) serveClient(app, clientDir);
  if (devClient) app.use(devClient);
  app.use(problemHandler);
  return app;
}

function serveClient(app: Express, folder: string): void {
  app.use(
    '/assets',
    compressedAssets(path.join(folder, 'assets')),
    express.static(path.join(folder, 'assets'), {
      immutable: true,
      maxAge: '1y',
      fallthrough: false,
      index: false,
    }),
  );
  app.use(express.static(folder, { index: false, maxAge: '1h' }));
  app.get(/.*/, async (req, res) => {
    const page = path.join(folder, 'index.html');
    if (!existsSync(page)) {
      res.status(503).type('text').send('The client has not been built. Run: npm run build');
      return;
    }
    res.setHeader('Cache-Control', 'no-cache');
    // Public pages can be read without JavaScript: their text stands in the page before the script takes it over.
    const reading = await readingPage(req.path, new Date());
    if (reading)
      res
        .status(reading.status)
        .type('html')
        .send(fillPage(await readFile(page, 'utf8'), reading));
    else res.sendFile(page);
  });
}
