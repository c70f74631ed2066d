import type { FastifyRequest } from 'fastify';
import { CaseError } from '../case/errors.ts';

/** Names under which this machine reaches itself. */
const LOOPBACK: readonly string[] = ['localhost', '127.0.0.1', '[::1]'];

/**
 * Refuses requests that another site's page sends through the user's browser: a Host that is not ours (a foreign name
 * pointed at this machine) and an Origin other than the address asked.
 *
 * @param names further host names that are ours
 * @throws {CaseError} FOREIGN_HOST, FOREIGN_ORIGIN, by the function returned
 */
export function ownOrigin(names: readonly string[]): (request: FastifyRequest) => Promise<void> {
  const ours = new Set([...LOOPBACK, ...names]);
  return async ({ headers, url }) => {
    const host = addressOf(`http://${headers.host ?? ''}`);
    if (host === undefined || !ours.has(host.hostname)) throw foreignHost();
    const { origin } = headers;
    if (origin !== undefined && addressOf(origin)?.host !== host.host) throw foreignOrigin();
    // Requests without Origin (images, scripts) still say where they are from in browsers.
    const site = headers['sec-fetch-site'];
    if (url.startsWith('/api/') && site !== undefined && site !== 'same-origin' && site !== 'none') {
      throw foreignOrigin();
    }
  };
}

function addressOf(text: string): URL | undefined {
  return URL.canParse(text) ? new URL(text) : undefined;
}

function foreignHost(): CaseError {
  return new CaseError(
    'FOREIGN_HOST',
    'The request names a host that is not this service',
    { key: 'host' },
    'Open the address that the program printed when it started',
  );
}

function foreignOrigin(): CaseError {
  return new CaseError(
    'FOREIGN_ORIGIN',
    'The request comes from a page of another site',
    { key: 'origin' },
    'Use the page that this service itself gives',
  );
}
