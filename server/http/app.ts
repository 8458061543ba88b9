// The Express app, in the order in which a request passes. Decides nothing; puts the parts behind each other.

import compression from 'compression';
import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import type { Logger } from 'pino';
import type { Auth } from '@/server/auth/auth';
import type { WhoIs } from '@/server/auth/actor';
import type { Env } from '@/server/env';
import type { AnyAction, Transact } from '@/server/transact';
import { authRouter } from './auth-doors';
import { answerFaults, isDatabaseAway } from './faults';
import { securityHeaders } from './headers';
import type { Limits } from './limits';
import { logRequests } from './log';
import { mount } from './mount';
import { openApiOf } from './openapi';
import { checkOrigin } from './origin';
import { pages } from './pages';
import { sendProblem } from './problem';

export interface AppNeeds {
  env: Env;
  log: Logger;
  actions: readonly AnyAction[];
  transact: Transact;
  auth: Auth;
  whoIs: WhoIs;
  limits: Limits;
  /** False until the tables are there and the demo is filled. */
  isReady: () => boolean;
}

/** Until a start is likely over (own choice). */
const startSeconds = 2;

export function makeApp(needs: AppNeeds): Express {
  const { env, log, actions, transact, auth, whoIs, limits } = needs;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', 'loopback');
  app.set('query parser', 'simple');
  app.use(logRequests(log));
  app.use(securityHeaders(env.baseUrl.startsWith('https:')));
  app.use('/api', noStore, whileStarting(needs), checkOrigin(env), compression());
  app.use('/api/auth', authRouter({ auth, transact, whoIs, limits, baseUrl: env.baseUrl }));
  const description = openApiOf(
    actions.map(({ contract }) => contract),
    env,
  );
  app.get('/api/openapi.json', (_request, response) => void response.json(description));
  app.use(mount(actions, { env, transact, whoIs, limits }));
  app.use('/api', (request, response) => sendProblem(request, response, { status: 404, code: 'not_found' }));
  app.use('/api', healthWithoutDatabase(env.version));
  app.use(pages(env.webFolder));
  app.use((request, response) => sendProblem(request, response, { status: 404, code: 'not_found' }));
  app.use(answerFaults);
  return app;
}

function noStore(_request: Request, response: Response, next: NextFunction): void {
  response.setHeader('Cache-Control', 'no-store');
  next();
}

function whileStarting({ env, isReady }: AppNeeds) {
  return (request: Request, response: Response, next: NextFunction): void => {
    if (isReady()) return next();
    if (request.path === '/health')
      return void response.status(503).json({ status: 'starting', database: false, jobs: false, version: env.version });
    sendProblem(request, response, { status: 503, code: 'starting', retryAfterSeconds: startSeconds });
  };
}

/** Health has its own shape also when nothing can be read. */
function healthWithoutDatabase(version: string) {
  return (error: unknown, request: Request, response: Response, next: NextFunction): void => {
    if (request.path === '/health' && isDatabaseAway(error))
      return void response.status(503).json({ status: 'failing', database: false, jobs: false, version });
    next(error);
  };
}
