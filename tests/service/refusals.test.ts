import { afterAll, expect, it } from 'vitest';
import { room, served } from './served.ts';

const { service, ask, errorOf } = served();
afterAll(() => service.close());

const drawn = { svg: '<svg/>', name: 'a.svg', length: 'mm', time: 's', diffusion: '1', catching: [] };

it('refuses bodies that do not fit and names the key at fault', async () => {
  const bodies: [string, unknown, string][] = [
    ['/api/jobs', {}, 'body'],
    ['/api/jobs', { caseId: 'a', layout: 7 }, 'body.layout'],
    ['/api/jobs', { caseId: 'a', layout: 'b', priority: 1 }, 'body'],
    ['/api/jobs', [], 'body'],
    ['/api/cases', {}, 'body'],
    ['/api/cases', { case: 7 }, 'body.case'],
    ['/api/cases', { ...drawn, catching: ['a', 7] }, 'body.catching.1'],
    ['/api/cases', { case: '{}', svg: '<svg/>' }, 'body'],
    ['/api/drawings', { svg: '<svg/>', name: 'a'.repeat(300) }, 'body.name'],
  ];
  for (const [url, body, key] of bodies) {
    const error = await errorOf('POST', url, body);
    expect([error.status, error.code, error.where.key], JSON.stringify(body)).toEqual([
      400,
      'BODY_DOES_NOT_FIT',
      key,
    ]);
  }
});

it('refuses what is not JSON, or would change the prototype of objects', async () => {
  const send = async (payload: string, type: string) => {
    const answer = await service.inject({
      method: 'POST',
      url: '/api/jobs',
      payload,
      headers: { 'content-type': type },
    });
    return [answer.statusCode, answer.json().error.code];
  };
  expect(await send('{"caseId"', 'application/json')).toEqual([400, 'BODY_NOT_JSON']);
  expect(await send('', 'application/json')).toEqual([400, 'BODY_NOT_JSON']);
  const polluting = '{"caseId":"a","layout":"b","__proto__":{"admin":true}}';
  expect(await send(polluting, 'application/json')).toEqual([400, 'BODY_NOT_JSON']);
  expect(await send('a=b', 'application/x-www-form-urlencoded')).toEqual([415, 'BODY_TYPE_UNKNOWN']);
});

it('says of unknown cases, jobs, layouts and addresses that they are unknown', async () => {
  const unknown: [('GET' | 'POST' | 'DELETE' | 'PUT')?, string?, string?, unknown?][] = [
    ['GET', '/api/cases/none', 'UNKNOWN_CASE'],
    ['GET', '/api/cases/__proto__', 'UNKNOWN_CASE'],
    ['GET', '/api/cases/none/layouts/a', 'UNKNOWN_CASE'],
    ['GET', '/api/cases/none/layouts/a/field', 'UNKNOWN_CASE'],
    ['POST', '/api/jobs', 'UNKNOWN_CASE', { caseId: 'none', layout: 'a' }],
    ['GET', '/api/jobs/none', 'UNKNOWN_JOB'],
    ['GET', '/api/jobs/none/events', 'UNKNOWN_JOB'],
    ['DELETE', '/api/jobs/none', 'UNKNOWN_JOB'],
    ['POST', '/api/samples/none', 'UNKNOWN_SAMPLE'],
    ['GET', '/api/none', 'NO_SUCH_ADDRESS'],
    ['PUT', '/api/samples', 'NO_SUCH_ADDRESS'],
    ['GET', '/none.html', 'NO_SUCH_ADDRESS'],
  ];
  for (const [method, url, code, body] of unknown) {
    const error = await errorOf(method, url ?? '', body);
    expect([error.status, error.code], url).toEqual([404, code]);
  }
});

it('refuses bodies larger than the address takes, and texts larger than a case or drawing may be', async () => {
  const small = await errorOf('POST', '/api/jobs', { caseId: 'a'.repeat(100_000), layout: 'b' });
  expect([small.status, small.code]).toEqual([413, 'BODY_TOO_LARGE']);
  const body = await errorOf('POST', '/api/cases', { case: 'a'.repeat(22_000_000) });
  expect([body.status, body.code]).toEqual([413, 'BODY_TOO_LARGE']);
  const large = await errorOf('POST', '/api/cases', { case: 'a'.repeat(10_000_001) });
  expect([large.status, large.code]).toEqual([413, 'CASE_TOO_LARGE']);
  for (const [url, payload] of [
    ['/api/cases', { ...drawn, svg: 'é'.repeat(2_500_001) }],
    ['/api/drawings', { svg: 'é'.repeat(2_500_001), name: 'a.svg' }],
    ['/api/cases', { case: '{}', files: { 'a.svg': 'é'.repeat(2_500_001) } }],
  ] as const) {
    const drawing = await errorOf('POST', url, payload);
    expect([drawing.status, drawing.code]).toEqual([413, 'DRAWING_TOO_LARGE']);
  }
});

it('refuses foreign hosts and origins, also of addresses that are unknown', async () => {
  const codeFor = async (headers: Record<string, string>, url = '/health') => {
    const answer = await service.inject({ url, headers });
    return [answer.statusCode, answer.statusCode === 200 ? '' : answer.json().error.code];
  };
  const hosts = ['evil.example', 'localhost.evil.example', '127.0.0.1.evil.example:8717', '10.0.0.1', 'a b'];
  for (const host of hosts) {
    expect(await codeFor({ host }), host).toEqual([403, 'FOREIGN_HOST']);
    expect(await codeFor({ host }, '/none'), host).toEqual([403, 'FOREIGN_HOST']);
  }
  for (const host of ['localhost', '127.0.0.1:8717', '[::1]:9000', 'LOCALHOST:80']) {
    expect(await codeFor({ host, origin: `http://${host}` }), host).toEqual([200, '']);
  }
  const host = 'localhost:8717';
  for (const origin of ['http://evil.example', 'http://localhost:3000', 'null', '', 'file://']) {
    expect(await codeFor({ host, origin }), origin).toEqual([403, 'FOREIGN_ORIGIN']);
  }
  for (const site of ['cross-site', 'same-site']) {
    expect(await codeFor({ host, 'sec-fetch-site': site }, '/api/samples'), site).toEqual([
      403,
      'FOREIGN_ORIGIN',
    ]);
  }
  expect(await codeFor({ host, 'sec-fetch-site': 'same-origin' }, '/api/samples')).toEqual([200, '']);
});

it('sends a policy without inline scripts or styles, with every answer', async () => {
  for (const url of ['/health', '/none', '/api/cases/none']) {
    const { headers } = await ask('GET', url);
    const policy = String(headers['content-security-policy']);
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self' 'wasm-unsafe-eval'");
    expect(policy).not.toContain('unsafe-inline');
    expect(headers['x-content-type-options']).toBe('nosniff');
  }
});

it('keeps more requests than the limit out, with the one shape of errors', async () => {
  const few = served({ requestsPerMinute: 2 });
  try {
    expect((await few.ask('GET', '/health')).status).toBe(200);
    expect((await few.ask('GET', '/health')).status).toBe(200);
    const error = await few.errorOf('GET', '/health');
    expect([error.status, error.code]).toEqual([429, 'TOO_MANY_REQUESTS']);
  } finally {
    await few.service.close();
  }
});

it('refuses addresses that climb out of the page or cannot be read', async () => {
  const urls = [
    '/../package.json',
    '/..%2fpackage.json',
    '/%2e%2e/%2e%2e/etc/passwd',
    '/a/%00',
    '/%zz',
    '//etc/passwd',
  ];
  for (const url of [...urls, '/api/samples/..%2f..%2fpackage', '/api/cases/..%2f..%2fetc%2fpasswd']) {
    const { status } = await errorOf(url.startsWith('/api/samples') ? 'POST' : 'GET', url);
    expect([400, 403, 404], url).toContain(status);
  }
});

it('says which key of a case is at fault, and nothing of how it was found', async () => {
  const error = await errorOf('POST', '/api/cases', { case: JSON.stringify({ ...room, colour: 'red' }) });
  expect(error.status).toBe(422);
  expect(JSON.stringify(error)).toContain('colour');
  for (const text of ['', 'null', '[]', '{', '{"__proto__":1}', '['.repeat(200_000)]) {
    expect((await errorOf('POST', '/api/cases', { case: text })).status, text.slice(0, 20)).toBe(422);
  }
});
