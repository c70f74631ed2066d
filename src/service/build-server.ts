import { existsSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import helmet from '@fastify/helmet';
import rateLimit from '@fastify/rate-limit';
import staticFiles from '@fastify/static';
import type { TypeBoxTypeProvider } from '@fastify/type-provider-typebox';
import fastify, { type FastifyReply } from 'fastify';
import { CaseError } from '../case/errors.ts';
import { Desk } from './desk.ts';
import { errorView, noSuchAddress } from './error-view.ts';
import { OpenStreams } from './job-events.ts';
import { ownOrigin } from './own-origin.ts';
import { packageRoot } from './package-root.ts';
import { answerRoutes, type Behind, caseRoutes, jobRoutes, type Service } from './routes.ts';
import { findSamples } from './samples.ts';

export interface ServerOptions {
  /** Solves that run at once; default one per core. */
  readonly threads?: number;
  /** Folder of the sample cases; default the package's. */
  readonly samples?: string;
  /** Folder of the built page; default the package's. */
  readonly page?: string;
  /** Requests per minute and client; default {@link REQUESTS_PER_MINUTE}. */
  readonly requestsPerMinute?: number;
  /** Host names beside this machine's own that are ours. */
  readonly hostNames?: readonly string[];
  /** Told the traces of our own faults; default: written to standard error. */
  readonly onFault?: (trace: string) => void;
}

/** Enough for a page that asks without pause, too little to keep the service from others. */
export const REQUESTS_PER_MINUTE = 6000;

/** Largest body where nothing else is said. */
const SMALL_BODY = 65_536;

/** Policy of the page: its own scripts and styles only, none written inline. */
const POLICY = {
  'default-src': ["'none'"],
  'script-src': ["'self'", "'wasm-unsafe-eval'"],
  'worker-src': ["'self'", 'blob:'],
  'style-src': ["'self'"],
  'img-src': ["'self'", 'data:', 'blob:'],
  'font-src': ["'self'"],
  'connect-src': ["'self'"],
  'base-uri': ["'none'"],
  'form-action': ["'none'"],
  'frame-ancestors': ["'none'"],
};

/** The service, ready to listen or to be asked by `inject`; `close()` ends its work and its threads. */
export function buildServer(options: ServerOptions = {}): Service {
  const onFault = options.onFault ?? ((trace: string) => process.stderr.write(`${trace}\n`));
  const service: Service = fastify({
    bodyLimit: SMALL_BODY,
    requestTimeout: 30_000,
    keepAliveTimeout: 10_000,
    forceCloseConnections: true,
    http: { headersTimeout: 10_000, connectionsCheckingInterval: 1000 },
    routerOptions: { maxParamLength: 4000 },
    ajv: { customOptions: { removeAdditional: false, coerceTypes: false, allErrors: false } },
    frameworkErrors: (error, _request, reply) => answerError(error, reply, onFault),
    clientErrorHandler: (_error, socket) => {
      if (socket.writable) socket.end(BROKEN_REQUEST);
      else socket.destroy();
    },
  }).withTypeProvider<TypeBoxTypeProvider>();
  const root = packageRoot();
  const behind: Behind = {
    desk: new Desk({ threads: options.threads ?? availableParallelism(), onFault }),
    samples: findSamples(options.samples ?? join(root, 'meshes')),
    streams: new OpenStreams(),
  };
  service.addHook('onRequest', ownOrigin(options.hostNames ?? []));
  void service.register(helmet, {
    contentSecurityPolicy: { useDefaults: false, directives: POLICY },
    // The service speaks plain HTTP on this machine; a browser told otherwise could not come back.
    strictTransportSecurity: false,
    referrerPolicy: { policy: 'no-referrer' },
  });
  void service.register(rateLimit, {
    max: options.requestsPerMinute ?? REQUESTS_PER_MINUTE,
    timeWindow: '1 minute',
    errorResponseBuilder: () => tooManyRequests(),
  });
  service.setErrorHandler((error, _request, reply) => answerError(error, reply, onFault));
  void service.register(async (inner) => {
    const routed = inner.withTypeProvider<TypeBoxTypeProvider>();
    inner.setNotFoundHandler((_request, reply) => answerError(noSuchAddress(), reply, onFault));
    caseRoutes(routed, behind);
    answerRoutes(routed, behind);
    jobRoutes(routed, behind);
    pageRoutes(routed, options.page ?? join(root, 'dist', 'page'));
  });
  service.addHook('onListen', async () => behind.desk.warm());
  service.addHook('preClose', async () => behind.streams.endAll());
  service.addHook('onClose', async () => behind.desk.close());
  return service;
}

function pageRoutes(service: Service, folder: string): void {
  if (existsSync(join(folder, 'index.html'))) {
    void service.register(staticFiles, { root: folder, index: 'index.html', cacheControl: true, maxAge: 0 });
    return;
  }
  service.get('/', async () => {
    throw new CaseError(
      'PAGE_NOT_BUILT',
      'The page is not built yet',
      {},
      'Run npm run build, then start again',
    );
  });
}

function answerError(error: unknown, reply: FastifyReply, onFault: (trace: string) => void): FastifyReply {
  const { status, body, trace } = errorView(error);
  if (trace !== undefined && status >= 500) onFault(trace);
  return reply.code(status).type('application/json; charset=utf-8').send(body);
}

function tooManyRequests(): CaseError {
  return new CaseError(
    'TOO_MANY_REQUESTS',
    'More requests came within a minute than the service takes',
    {},
    'Wait a minute',
  );
}

/** What a client gets whose bytes are no HTTP request, or come too slowly. */
const BROKEN_REQUEST = (() => {
  const { body } = errorView(
    new CaseError('REQUEST_REFUSED', 'The request cannot be read, or came too slowly', {}, 'Send it again'),
  );
  const text = JSON.stringify(body);
  const head = [
    'HTTP/1.1 400 Bad Request',
    'content-type: application/json; charset=utf-8',
    `content-length: ${Buffer.byteLength(text)}`,
    'connection: close',
  ];
  return `${head.join('\r\n')}\r\n\r\n${text}`;
})();
