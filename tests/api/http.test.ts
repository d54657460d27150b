/** What every answer of the web server has in common: headers, problem documents, limits. */
import pino from 'pino';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { problem } from '#contract/error.ts';
import { routes } from '#contract/routes.ts';
import { createTestApp, type TestApp } from '../setup/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

describe('an answer', () => {
  it('forbids foreign scripts and frames, and forces no https on plain http', async () => {
    const { headers } = await app.visitor().send(routes.getHealth);
    const policy = headers['content-security-policy'];
    expect(policy).toMatch(/script-src 'self' 'wasm-unsafe-eval'(;|$)/);
    expect(policy).toContain(`frame-ancestors 'none'`);
    expect(policy).not.toContain('upgrade-insecure-requests');
    expect(headers).not.toHaveProperty('strict-transport-security');
    expect(headers).not.toHaveProperty('x-powered-by');
    expect(headers['x-content-type-options']).toBe('nosniff');
  });

  it('carries a request id of its own, not the sender’s', async () => {
    const [first, second] = [await app.visitor({ 'x-request-id': 'mine' }).send(routes.getHealth), await app.visitor().send(routes.getHealth)];
    expect(first.headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
    expect(first.headers['x-request-id']).not.toBe(second.headers['x-request-id']);
  });

  it('tells that the service is up', async () => {
    expect(await app.visitor().call(routes.getHealth)).toMatchObject({ ok: true, database: true, demo: true });
  });
});

describe('a refusal', () => {
  const expectProblem = (response: { headers: Record<string, string>; body: unknown; status: number }, expected: object) => {
    expect(response.headers['content-type']).toContain('application/problem+json');
    expect(problem.parse(response.body)).toMatchObject({ status: response.status, requestId: response.headers['x-request-id'], ...expected });
  };

  it('of an unknown address is JSON, for any method', async () => {
    for (const method of ['get', 'post', 'delete'] as const) expectProblem(await app.visitor().http[method]('/api/nothing'), { status: 404, code: 'not-found' });
  });

  it('of text that is no JSON says so', async () => {
    expectProblem(await app.founder.http.post('/api/tokens').set('content-type', 'application/json').send('{"name": '), { status: 400, code: 'invalid-input' });
  });

  it('of a body that is too large says so', async () => {
    const response = await app.founder.send(routes.createToken, { body: { name: 'x'.repeat(3 * 2 ** 20), scopes: ['read'] } });
    expectProblem(response, { status: 413, code: 'file-too-large' });
    expectProblem(await app.visitor().http.post('/api/auth/sign-in/email').set('content-type', 'application/json').send(`{"email": "${'x'.repeat(100_000)}"}`), { status: 413, code: 'file-too-large' });
  });

  it('of an address that cannot be decoded says so', async () => {
    expectProblem(await app.founder.http.get('/api/campaigns/%E0%A4%A'), { status: 400, code: 'invalid-input' });
  });

  it('of a form names each field', async () => {
    const response = await app.founder.send(routes.createToken, { body: { name: ' ', scopes: [], days: 1000 } });
    expectProblem(response, { status: 400, code: 'invalid-input' });
    expect((response.body.issues as { path: string }[]).map((issue) => issue.path).sort()).toEqual(['days', 'name', 'scopes']);
  });

  it('that nobody foresaw gives away nothing and is in the log with its cause', async () => {
    const lines: string[] = [];
    const broken = await createTestApp({ log: pino({ level: 'error' }, { write: (line: string) => void lines.push(line) }) });
    try {
      await broken.parts.db.$client.query('alter table campaign rename to campaign_gone');
      const response = await broken.founder.send(routes.listCampaigns);
      expectProblem(response, { status: 500, code: 'internal' });
      expect(response.text).not.toMatch(/campaign_gone|relation|select|node_modules| at /i);
      const logged = lines.find((line) => line.includes('unexpected error'));
      expect(logged).toContain(response.body.requestId);
      expect(logged).toContain('does not exist');
    } finally {
      await broken.close();
    }
  });
});

describe('the log', () => {
  it('keeps no secret of a request', async () => {
    const lines: string[] = [];
    const parent = pino({ level: 'debug' }, { write: (line: string) => void lines.push(line) });
    const watched = await createTestApp({ log: parent });
    try {
      const person = await watched.makePerson();
      const token = await watched.makeToken(person, { scopes: ['read'] });
      await token.send(routes.getMe);
      await watched.visitor().send(routes.viewInvitation, { params: { secret: 'an-invitation-secret' } });
      await watched.visitor().http.get('/api/campaigns?code=a-secret-in-the-query');
      const text = lines.join('');
      expect(text).toContain('/api/me');
      for (const secret of [person.password, token.secret, 'an-invitation-secret', 'a-secret-in-the-query', 'session_token']) expect(text).not.toContain(secret);
    } finally {
      await watched.close();
    }
  });
});

describe('too many attempts', () => {
  it('to sign in are stopped; who succeeds is not', async () => {
    const guarded = await createTestApp();
    try {
      const account = await guarded.makeAccountFor();
      const attempt = (password: string) => guarded.visitor().http.post('/api/auth/sign-in/email').send({ email: account.email, password });
      for (let i = 0; i < 30; i += 1) if (i % 10 === 0) expect((await attempt(account.password)).status).toBe(200);
      const answers: number[] = [];
      for (let i = 0; i < 25; i += 1) answers.push((await attempt('not the password')).status);
      expect(new Set(answers.slice(0, 15))).toEqual(new Set([401]));
      expect(answers.at(-1)).toBe(429);
      const refused = await attempt(account.password);
      expectTooMany(refused);
    } finally {
      await guarded.close();
    }
  });

  it('at invitations are stopped', async () => {
    const guarded = await createTestApp();
    try {
      const answers = await Promise.all(Array.from({ length: 40 }, (_, i) => guarded.visitor().send(routes.viewInvitation, { params: { secret: `guess-${i}` } })));
      expect(answers.filter((answer) => answer.status === 404)).toHaveLength(30);
      expectTooMany(answers.find((answer) => answer.status !== 404)!);
    } finally {
      await guarded.close();
    }
  });

  function expectTooMany(response: { status: number; body: object; headers: Record<string, string> }) {
    expect(response.body).toMatchObject({ status: 429, code: 'too-many-requests' });
    expect(response.headers).toHaveProperty('retry-after');
  }
});
