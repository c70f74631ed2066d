import { readFileSync } from 'node:fs';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { extname, join } from 'node:path';
import { FAKE_CASE, fakeField, fakeLayout } from './fake-case.ts';

/** Stands in for the service while the page is looked at: same addresses, a strict content policy, slow jobs. */

const TYPES: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript',
  '.css': 'text/css',
  '.svg': 'image/svg+xml',
};
const POLICY = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self'; connect-src 'self'";

export interface FakeOptions {
  /** Folder of the built page. */
  readonly page: string;
  /** Milliseconds between two events of a job; a job has four. Never done when infinite. */
  readonly pace: number;
}

/** Listens on a free port of the loopback address. */
export async function startFakeService(options: FakeOptions): Promise<{ address: string; server: Server }> {
  const server = createServer((request, response) => answer(request, response, options));
  await new Promise<void>((ready) => server.listen(0, '127.0.0.1', ready));
  const at = server.address();
  const port = typeof at === 'object' && at !== null ? at.port : 0;
  return { address: `http://127.0.0.1:${port}/`, server };
}

function json(response: ServerResponse, value: unknown, status = 200): void {
  response.writeHead(status, { 'content-type': 'application/json' });
  response.end(JSON.stringify(value));
}

function answer(request: IncomingMessage, response: ServerResponse, { page, pace }: FakeOptions): void {
  const url = new URL(request.url ?? '/', 'http://fake');
  const path = decodeURIComponent(url.pathname);
  const [, layout = '', rest = ''] = /^\/api\/cases\/fake\/layouts\/([^/]+)(\/field)?$/.exec(path) ?? [];
  const job = /^\/api\/jobs\/(.+?)(\/events)?$/.exec(path);
  const view = (name: string, state: string, done: number, doing: string) => ({
    id: name,
    caseId: 'fake',
    layout: name,
    state,
    doing,
    done,
  });
  if (path === '/api/samples')
    json(response, [
      { name: 'chamber', title: 'Chamber with posts' },
      { name: 'dish', title: 'Dish with a slit' },
    ]);
  else if (path.startsWith('/api/samples/') || path === '/api/cases/fake') json(response, FAKE_CASE);
  else if (path === '/api/drawings') {
    json(response, {
      shapes: [
        { name: 'outer wall', closed: true, role: 'outline', size: [600, 400] },
        { name: 'inlet post', closed: true, role: 'hole', size: [55, 55] },
        { name: 'frame', closed: false, size: [700, 500] },
      ],
      notes: ['text "rev 3" is left out'],
    });
  } else if (path === '/api/cases') {
    json(
      response,
      {
        error: {
          code: 'CROSSING',
          what: 'The outline crosses itself, so inside and outside are not clear there',
          where: { at: [[0.866, 0.791]], key: 'drawing.outline', file: 'chamber.json', line: 31 },
          remedy: 'Move the corner near this place or take one of the two edges out',
        },
      },
      422,
    );
  } else if (rest === '/field') {
    response.writeHead(200, { 'content-type': 'application/octet-stream' });
    response.end(fakeField(layout));
  } else if (layout !== '') json(response, fakeLayout(layout, url.searchParams.get('start') ?? 'inlet bay'));
  else if (path === '/api/jobs') {
    let body = '';
    request.on('data', (chunk) => {
      body += String(chunk);
    });
    request.on('end', () =>
      json(response, view(JSON.parse(body).layout, 'waiting', 0, 'waiting for a thread'), 202),
    );
  } else if (job?.[2] === '/events') {
    response.writeHead(200, { 'content-type': 'text/event-stream' });
    const name = job[1] ?? '';
    const steps: [string, number, string][] = [
      ['running', 0.2, 'making the mesh'],
      ['running', 0.6, 'solving for 18 000 nodes'],
      ['done', 1, 'done'],
    ];
    const next = () => {
      const step = steps.shift();
      if (step === undefined) {
        response.end();
        return;
      }
      response.write(`event: job\ndata: ${JSON.stringify(view(name, step[0], step[1], step[2]))}\n\n`);
      if (Number.isFinite(pace)) setTimeout(next, pace);
    };
    next();
  } else if (job !== null) json(response, view(job[1] ?? '', 'stopped', 0, 'stopped'));
  else {
    try {
      const name = path === '/' ? '/index.html' : path;
      const content = readFileSync(join(page, name));
      response.writeHead(200, {
        'content-type': TYPES[extname(name)] ?? 'text/plain',
        'content-security-policy': POLICY,
      });
      response.end(content);
    } catch {
      json(
        response,
        { error: { code: 'NO_SUCH_ADDRESS', what: 'There is nothing here', where: {}, remedy: 'Go back' } },
        404,
      );
    }
  }
}
