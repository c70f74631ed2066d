import type { IncomingMessage, ServerResponse } from 'node:http';
import type { TypeBoxTypeProvider } from '@fastify/type-provider-typebox';
import type { FastifyBaseLogger, FastifyInstance, RawServerDefault } from 'fastify';
import { Type } from 'typebox';
import { CaseError } from '../case/errors.ts';
import { version } from '../run/version.ts';
import { CaseUpload, DrawingUpload, JobRequest } from './contract.ts';
import { checkSize, type Desk, LARGEST_DRAWING } from './desk.ts';
import { type OpenStreams, streamJob } from './job-events.ts';
import type { Sample } from './samples.ts';

/** The server with its schemas as types. */
export type Service = FastifyInstance<
  RawServerDefault,
  IncomingMessage,
  ServerResponse,
  FastifyBaseLogger,
  TypeBoxTypeProvider
>;

/** What the addresses need. */
export interface Behind {
  readonly desk: Desk;
  readonly samples: ReadonlyMap<string, Sample>;
  readonly streams: OpenStreams;
}

/** Bodies that carry a text of that many bytes: JSON writes quotes and line ends of a text as two. */
const CASE_BODY = 21_000_000;
const DRAWING_BODY = 11_000_000;
/** Texts sent per minute and client; reading each costs up to seconds of a thread. */
const UPLOADS = { rateLimit: { max: 240, timeWindow: '1 minute' } };

const caseParams = Type.Object({ id: Type.String() });
const layoutParams = Type.Object({ id: Type.String(), layout: Type.String() });
const jobParams = Type.Object({ id: Type.String() });

/** Addresses of samples, drawings and cases. */
export function caseRoutes(service: Service, { desk, samples }: Behind): void {
  service.get('/api/samples', async () => [...samples.values()].map(({ name, title }) => ({ name, title })));

  service.post(
    '/api/samples/:name',
    { schema: { params: Type.Object({ name: Type.String() }) }, config: UPLOADS },
    async ({ params }) => {
      const sample = samples.get(params.name);
      if (sample === undefined) throw unknownSample([...samples.keys()]);
      return desk.openSample(sample);
    },
  );

  service.post(
    '/api/drawings',
    { schema: { body: DrawingUpload }, bodyLimit: DRAWING_BODY, config: UPLOADS },
    async ({ body }) => {
      checkSize(body.svg, LARGEST_DRAWING, 'drawing');
      return desk.reading.drawing(body.svg, body.name);
    },
  );

  service.post(
    '/api/cases',
    { schema: { body: CaseUpload }, bodyLimit: CASE_BODY, config: UPLOADS },
    async ({ body }, reply) => {
      const view = await desk.upload(body);
      return reply.code(201).header('location', `/api/cases/${view.id}`).send(view);
    },
  );

  service.get('/api/cases/:id', { schema: { params: caseParams } }, async ({ params }) =>
    desk.caseView(params.id),
  );
}

/** Addresses of answers. */
export function answerRoutes(service: Service, { desk }: Behind): void {
  service.get(
    '/api/cases/:id/layouts/:layout',
    { schema: { params: layoutParams, querystring: Type.Object({ start: Type.Optional(Type.String()) }) } },
    async ({ params, query }) => desk.layoutView(params.id, params.layout, query.start),
  );

  service.get(
    '/api/cases/:id/layouts/:layout/field',
    { schema: { params: layoutParams } },
    async ({ params, headers }, reply) => {
      const { field, fieldHash } = desk.answer(params.id, params.layout);
      const tag = `"${fieldHash}"`;
      reply.header('etag', tag).header('cache-control', 'private, no-cache');
      const known = (headers['if-none-match'] ?? '').split(',').map((one) => one.trim().replace(/^W\//, ''));
      if (known.includes(tag)) return reply.code(304).send();
      return reply.type('application/octet-stream').send(field);
    },
  );
}

/** Addresses of work in the background. */
export function jobRoutes(service: Service, { desk, streams }: Behind): void {
  service.post('/api/jobs', { schema: { body: JobRequest } }, async ({ body }, reply) => {
    const job = desk.ask(body.caseId, body.layout);
    return reply.code(202).header('location', `/api/jobs/${job.id}`).send(job);
  });

  service.get(
    '/api/jobs/:id',
    { schema: { params: jobParams } },
    async ({ params }) => desk.jobs.state(params.id).view,
  );

  service.delete('/api/jobs/:id', { schema: { params: jobParams } }, async ({ params }) =>
    desk.jobs.cancel(params.id),
  );

  service.get(
    '/api/jobs/:id/events',
    { schema: { params: jobParams }, exposeHeadRoute: false },
    (request, reply) => {
      streamJob(request, reply, desk.jobs, request.params.id, streams);
    },
  );

  service.get('/health', async () => ({ status: 'ok', version, ...desk.jobs.counts }));
}

function unknownSample(known: readonly string[]): CaseError {
  return new CaseError(
    'UNKNOWN_SAMPLE',
    'There is no sample of this name',
    {},
    known.length === 0 ? 'Open a case of your own' : `Choose one of ${known.join(', ')}`,
  );
}
