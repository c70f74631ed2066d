import type {
  CaseUpload,
  CaseView,
  DrawingView,
  ErrorView,
  JobView,
  LayoutView,
  SampleView,
} from '../src/service/contract.ts';

/** Talks to the service the page came from. Paths are relative, so the page also works below another path. */

export type Refusal = ErrorView['error'];

/** The service refused what was sent and said why. */
export class Refused extends Error {
  readonly refusal: Refusal;
  readonly status: number;

  constructor(refusal: Refusal, status: number) {
    super(refusal.what);
    this.name = 'Refused';
    this.refusal = refusal;
    this.status = status;
  }
}

/** The service did not answer at all. */
export class ConnectionLost extends Error {
  constructor(cause: unknown) {
    super('the service does not answer', { cause });
    this.name = 'ConnectionLost';
  }
}

function isErrorView(value: unknown): value is ErrorView {
  const error = (value as { error?: unknown } | null)?.error as Record<string, unknown> | undefined;
  return typeof error?.['what'] === 'string' && typeof error['remedy'] === 'string';
}

async function send(path: string, method: string, body?: unknown): Promise<Response> {
  let response: Response;
  try {
    response = await fetch(`api/${path}`, {
      method,
      ...(body === undefined
        ? {}
        : { body: JSON.stringify(body), headers: { 'content-type': 'application/json' } }),
    });
  } catch (cause) {
    throw new ConnectionLost(cause);
  }
  if (response.ok) return response;
  const said: unknown = await response.json().catch(() => undefined);
  if (isErrorView(said)) {
    const where = said.error.where ?? {};
    throw new Refused({ ...said.error, where }, response.status);
  }
  if (response.status === 502 || response.status === 503 || response.status === 504) {
    throw new ConnectionLost(undefined);
  }
  const what =
    response.status === 429
      ? 'The service is asked too often at the moment.'
      : `The service answered with status ${response.status} and gave no reason.`;
  throw new Refused(
    { code: 'NO_REASON', what, where: {}, remedy: 'Try again in a moment.' },
    response.status,
  );
}

const json = async <T>(response: Promise<Response>): Promise<T> => (await (await response).json()) as T;
const part = encodeURIComponent;
const layoutPath = (id: string, layout: string) => `cases/${part(id)}/layouts/${part(layout)}`;

export const api = {
  samples: () => json<SampleView[]>(send('samples', 'GET')),
  openSample: (name: string) => json<CaseView>(send(`samples/${part(name)}`, 'POST')),
  readDrawing: (svg: string, name: string) => json<DrawingView>(send('drawings', 'POST', { svg, name })),
  openCase: (upload: CaseUpload) => json<CaseView>(send('cases', 'POST', upload)),
  caseAgain: (id: string) => json<CaseView>(send(`cases/${part(id)}`, 'GET')),
  solve: (caseId: string, layout: string) => json<JobView>(send('jobs', 'POST', { caseId, layout })),
  job: (id: string) => json<JobView>(send(`jobs/${part(id)}`, 'GET')),
  stop: (id: string) => send(`jobs/${part(id)}`, 'DELETE'),
  layout: (id: string, layout: string, start: string | undefined) =>
    json<LayoutView>(
      send(layoutPath(id, layout) + (start === undefined ? '' : `?start=${part(start)}`), 'GET'),
    ),
  field: async (id: string, layout: string) =>
    (await send(`${layoutPath(id, layout)}/field`, 'GET')).arrayBuffer(),
};

/**
 * Follows a job by server-sent events; where the stream breaks it asks again every second.
 *
 * @returns what ends the following
 */
export function followJob(
  id: string,
  changed: (job: JobView) => void,
  failed: (error: unknown) => void,
): () => void {
  let ended = false;
  let timer: ReturnType<typeof setTimeout> | undefined;
  const take = (job: JobView) => {
    if (ended) return;
    if (job.state !== 'waiting' && job.state !== 'running') end();
    changed(job);
  };
  const source = new EventSource(`api/jobs/${part(id)}/events`);
  source.addEventListener('job', (event: MessageEvent<string>) => take(JSON.parse(event.data) as JobView));
  const poll = () => {
    api.job(id).then(
      (job) => {
        take(job);
        if (!ended) timer = setTimeout(poll, 1000);
      },
      (error: unknown) => {
        if (!ended) failed(error);
        end();
      },
    );
  };
  source.onerror = () => {
    source.close();
    if (!ended && timer === undefined) timer = setTimeout(poll, 300);
  };
  function end(): void {
    ended = true;
    source.close();
    clearTimeout(timer);
  }
  return end;
}
