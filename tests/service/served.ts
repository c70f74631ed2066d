import type { InjectOptions } from 'fastify';
import { expect, vi } from 'vitest';
import type { CaseView, JobView, LayoutView } from '../../src/service/contract.ts';
import { buildServer, type ServerOptions } from '../../src/service/server.ts';

// Threads load and solve: on a busy machine that takes a while.
vi.setConfig({ testTimeout: 120_000, hookTimeout: 120_000 });

/** A room with a pad at each end; the particle is released everywhere or at a point. Invented. */
export const room = {
  tarry: 1,
  title: 'Room with two pads',
  units: { length: 'mm', time: 's' },
  drawing: {
    outline: { rectangle: [0, 0, 2, 1] },
    holes: { 'post 1': { circle: [0.6, 0.5], radius: 0.1 }, 'post 2': { circle: [1.4, 0.5], radius: 0.1 } },
  },
  particle: { diffusion: '1e-3 mm^2/s' },
  walls: {
    'left pad': { on: 'outline', near: [0, 0.5], width: 0.5 },
    'right pad': { on: 'outline', near: [2, 0.5], width: 0.5 },
    coat: { on: 'post 1' },
  },
  layouts: {
    'both pads': { 'left pad': 'absorbing', 'right pad': 'absorbing' },
    'left and coat': { 'left pad': 'absorbing', coat: { partlyAbsorbing: '1e-3 mm/s' } },
    'no way out': {},
  },
  starts: { anywhere: { evenIn: 'everywhere' }, middle: { point: [1, 0.5] } },
  pins: { corner: [0.1, 0.9] },
  asked: [{ figure: 'mean', start: 'anywhere', under: '20 min' }],
};

/** A sheet with a physical size: the square is 40 mm × 40 mm, its hole 10 mm across. */
export const sheet = `<svg xmlns="http://www.w3.org/2000/svg" width="60mm" height="60mm" viewBox="0 0 60 60">
  <rect id="rim" x="10" y="10" width="40" height="40" fill="none" stroke="black"/>
  <circle id="post" cx="30" cy="30" r="5"/>
</svg>`;

/** A service on its own threads; close it after the tests. */
export const served = (options: ServerOptions = {}) => {
  const service = buildServer({ threads: 1, samples: '/nowhere', page: '/nowhere', ...options });
  const ask = async (method: InjectOptions['method'], url: string, payload?: unknown) => {
    const answer = await service.inject({
      ...(method !== undefined && { method }),
      url,
      ...(payload !== undefined && { payload: payload as object }),
    });
    return {
      status: answer.statusCode,
      headers: answer.headers,
      bytes: answer.rawPayload,
      text: answer.payload,
    };
  };
  const json = async <T>(method: InjectOptions['method'], url: string, payload?: unknown): Promise<T> => {
    const { status, text } = await ask(method, url, payload);
    expect(status, text).toBeLessThan(300);
    return JSON.parse(text) as T;
  };
  const errorOf = async (method: InjectOptions['method'], url: string, payload?: unknown) => {
    const { status, text } = await ask(method, url, payload);
    const { error } = JSON.parse(text) as { error: { code: string; what: string; where: { key?: string } } };
    expect(Object.keys(error).sort()).toEqual(['code', 'remedy', 'what', 'where']);
    expect(text).not.toMatch(/node_modules|\.ts:|\.js:|at \w+ \(/);
    return { status, ...error };
  };
  const open = (theCase: object) => json<CaseView>('POST', '/api/cases', { case: JSON.stringify(theCase) });
  const ended = async (id: string): Promise<JobView> => {
    for (;;) {
      const job = await json<JobView>('GET', `/api/jobs/${id}`);
      if (job.state !== 'waiting' && job.state !== 'running') return job;
      await new Promise((later) => setTimeout(later, 20));
    }
  };
  const solve = async (caseId: string, layout: string): Promise<LayoutView> => {
    const { id } = await json<JobView>('POST', '/api/jobs', { caseId, layout });
    const job = await ended(id);
    expect(job, JSON.stringify(job.error)).toMatchObject({ state: 'done', done: 1 });
    return json<LayoutView>('GET', `/api/cases/${caseId}/layouts/${encodeURIComponent(layout)}`);
  };
  return { service, ask, json, errorOf, open, ended, solve };
};
