import { randomUUID } from 'node:crypto';
import {
  createServer,
  type IncomingMessage,
  type RequestListener,
  type Server,
  type ServerResponse,
} from 'node:http';
import type { Logger } from 'pino';
import sirv from 'sirv';
import { checkRequest, type FrontRules, type Refusal } from './check-request.ts';
import { stateClient } from './client-address.ts';
import { checkDeclaredBody, watchBody } from './limit-body.ts';
import { setSecurityHeaders } from './security-headers.ts';

export interface FrontOptions extends FrontRules {
  /** What answers when the front has no objection: Astro's handler. */
  handler: RequestListener;
  /** Folder of the built static files; left out in tests of the front alone. */
  staticFolder?: string;
  trustedProxies: readonly string[];
  /** Origins that a form of ours may end at besides our own: the payment service's pages. */
  formTargets: readonly string[];
  /** Resolves when the database answers; rejects otherwise. */
  checkHealth: () => Promise<void>;
  log: Pick<Logger, 'info' | 'error'>;
}

const TITLES: Record<Refusal['status'], string> = {
  400: 'Bad request',
  403: 'Forbidden',
  404: 'Not found',
  405: 'Method not allowed',
  413: 'Too large',
  421: 'Wrong host',
  431: 'Address too long',
};

function answerRefusal(response: ServerResponse, refusal: Refusal, requestId: string): void {
  if (response.headersSent) {
    response.destroy();
    return;
  }
  if (refusal.status === 405) response.setHeader('allow', 'GET, HEAD, POST, PUT, DELETE');
  response.writeHead(refusal.status, {
    'content-type': 'application/problem+json',
    'cache-control': 'no-store',
    connection: 'close',
  });
  response.end(
    JSON.stringify({
      type: 'urn:benchleaf:problem:front',
      title: TITLES[refusal.status],
      status: refusal.status,
      detail: `Refused: ${refusal.reason}.`,
      instance: requestId,
    }),
  );
}

async function answerHealth(response: ServerResponse, checkHealth: () => Promise<void>): Promise<void> {
  const isWell = await Promise.race([
    checkHealth().then(
      () => true,
      () => false,
    ),
    new Promise<boolean>((resolve) => setTimeout(resolve, 2_500, false).unref()),
  ]);
  response.writeHead(isWell ? 200 : 503, { 'content-type': 'application/json', 'cache-control': 'no-store' });
  response.end(JSON.stringify({ status: isWell ? 'ok' : 'the database does not answer' }));
}

/** Path of a request as the log keeps it: without the query, and with ids taken out, so that no line tells who or what. */
function routeOf(request: IncomingMessage): string {
  const path = (request.url ?? '').split('?', 1)[0] ?? '';
  return path.replace(/[0-9a-f]{8}-[0-9a-f-]{27,}|[0-9a-f]{64}|[A-Za-z0-9_-]{32,}/g, ':id').slice(0, 200);
}

/**
 * The front: the server that stands before Astro. It turns away whatever is crooked, foreign or too large, says who is calling in a header that nobody else
 * can write, puts the security headers on every answer, serves the built files, and hands the rest on.
 */
export function createFront(options: FrontOptions): Server {
  const { handler, log } = options;
  const isHttps = options.origin.startsWith('https:');
  const serveStatic = options.staticFolder
    ? sirv(options.staticFolder, {
        etag: true,
        dotfiles: false,
        setHeaders: (response, pathname) => {
          const isHashed = pathname.startsWith('/_astro/');
          response.setHeader(
            'cache-control',
            isHashed ? 'public, max-age=31536000, immutable' : 'public, max-age=3600',
          );
        },
      })
    : null;

  const server = createServer(
    {
      maxHeaderSize: 16_384,
      requestTimeout: 60_000,
      headersTimeout: 10_000,
      keepAliveTimeout: 5_000,
      connectionsCheckingInterval: 2_000,
    },
    (request, response) => {
      const requestId = randomUUID();
      const startedAt = process.hrtime.bigint();
      setSecurityHeaders(response, { isHttps, formTargets: options.formTargets });
      response.setHeader('x-request-id', requestId);
      response.on('finish', () => {
        log.info(
          {
            requestId,
            method: request.method,
            route: routeOf(request),
            status: response.statusCode,
            ms: Number((process.hrtime.bigint() - startedAt) / 1_000_000n),
          },
          'request',
        );
      });
      const path = (request.url ?? '').split('?', 1)[0] ?? '';
      if (path === '/healthz' && request.method === 'GET') {
        void answerHealth(response, options.checkHealth);
        return;
      }
      const refusal = checkRequest(request, options) ?? checkDeclaredBody(request, path);
      if (refusal) {
        answerRefusal(response, refusal, requestId);
        return;
      }
      stateClient(request, requestId, options.trustedProxies);
      watchBody(request, path, () => {
        answerRefusal(response, { status: 413, reason: 'the body is too large' }, requestId);
        request.destroy();
      });
      const pass = () => {
        handler(request, response);
      };
      if (serveStatic && (request.method === 'GET' || request.method === 'HEAD'))
        serveStatic(request, response, pass);
      else pass();
    },
  );
  server.maxRequestsPerSocket = 1_000;
  return server;
}
