import { CaseError } from '../case/errors.ts';
import { buildServer, type ServerOptions } from './build-server.ts';
import type { Service } from './routes.ts';

export { buildServer, type ServerOptions } from './build-server.ts';

export interface ListenOptions extends ServerOptions {
  /** First port tried; 0 for any. Default {@link DEFAULT_PORT}. */
  readonly port?: number;
  /** Only this machine's own addresses are taken, until the service knows tokens. Default 127.0.0.1. */
  readonly host?: string;
}

/** A service that listens. */
export interface Running {
  readonly service: Service;
  readonly port: number;
  /** Where a browser finds the page. */
  readonly address: string;
  /** Ends its work, its threads and its streams. */
  close(): Promise<void>;
}

export const DEFAULT_PORT = 8717;

const LOOPBACK: readonly string[] = ['127.0.0.1', 'localhost', '::1'];
/** Ports tried after the first one that is taken. */
const MORE_PORTS = 50;

/**
 * Starts the service on the first free port from the one given.
 *
 * @throws {CaseError} by the promise: HOST_NOT_LOCAL, NO_FREE_PORT, PORT_REFUSED
 */
export async function startServer(options: ListenOptions = {}): Promise<Running> {
  const { port: first = DEFAULT_PORT, host = '127.0.0.1', ...rest } = options;
  if (!LOOPBACK.includes(host)) throw hostNotLocal(host);
  const last = first === 0 ? 0 : Math.min(first + MORE_PORTS, 65_535);
  for (let port = first; port <= last; port++) {
    // Fastify listens once in its life, so each port gets a service of its own; threads start with the first work.
    const service = buildServer(rest);
    try {
      await service.listen({ port, host });
    } catch (error) {
      await service.close();
      if ((error as NodeJS.ErrnoException).code === 'EADDRINUSE') continue;
      throw portRefused(port, error);
    }
    const address = service.server.address();
    const bound = typeof address === 'object' && address !== null ? address.port : port;
    const name = host.includes(':') ? `[${host}]` : host;
    return { service, port: bound, address: `http://${name}:${bound}/`, close: () => service.close() };
  }
  throw new CaseError(
    'NO_FREE_PORT',
    `Every port from ${first} to ${last} is taken`,
    { key: '--port' },
    'Name another with --port',
  );
}

function hostNotLocal(host: string): CaseError {
  return new CaseError(
    'HOST_NOT_LOCAL',
    `The service does not open itself to other machines yet, as "${host}" would`,
    { key: '--host' },
    'Leave --host out; the page is then reached from this machine',
  );
}

function portRefused(port: number, cause: unknown): CaseError {
  return new CaseError(
    'PORT_REFUSED',
    `Port ${port} cannot be opened`,
    { key: '--port' },
    'Name one from 1024 to 65535 with --port',
    cause,
  );
}
