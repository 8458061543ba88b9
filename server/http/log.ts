// The log: one JSON line a request, and faults with their id. No bodies, no addresses of mail, no query of a person's record.

import { randomUUID } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { pino, type Logger } from 'pino';
import { pinoHttp } from 'pino-http';

export function makeLog(level: string): Logger {
  return pino({ level, base: null, serializers: { err: plainError } });
}

/** A query's error carries its values, which may be somebody's record: only the database's own words go into the log. */
function plainError(error: unknown): object {
  if (!(error instanceof Error)) return { message: 'not an error' };
  const cause = error.cause instanceof Error ? error.cause : undefined;
  const wrapped = cause !== undefined && 'query' in error;
  return {
    type: error.name,
    message: wrapped ? cause.message : error.message,
    code: codeOf(cause ?? error),
    stack: (wrapped ? cause : error).stack,
  };
}

function codeOf(error: Error): string | undefined {
  return 'code' in error && typeof error.code === 'string' ? error.code : undefined;
}

/** Gives each request its id, which the answer carries too, and logs how it ended. */
export function logRequests(log: Logger) {
  return pinoHttp({
    logger: log,
    // Wrapped, our serializer would get a copy of the error that has lost its cause.
    wrapSerializers: false,
    genReqId: (_request: IncomingMessage, response: ServerResponse) => {
      const id = randomUUID();
      response.setHeader('X-Request-Id', id);
      return id;
    },
    serializers: {
      req: ({ id, method, url }: { id: string; method: string; url: string }) => ({
        id,
        method,
        path: url.split('?')[0],
      }),
      res: ({ statusCode }: { statusCode: number }) => ({ status: statusCode }),
      err: plainError,
    },
    autoLogging: { ignore: ({ url }) => url === '/api/health' || url?.startsWith('/_expo/') === true },
    customLogLevel: (_request, response, error) => (error || response.statusCode >= 500 ? 'error' : 'debug'),
  });
}
