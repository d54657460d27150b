/**
 * The real application for tests: createApp on a database, a storage folder, a mail server and a port of its own, and people who use it
 * over HTTP. Accounts and roles are made by the services that the product uses; nothing is stood in for.
 */
import { randomBytes } from 'node:crypto';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Logger } from 'pino';
import supertest from 'supertest';
import type { MemberRole, TokenScope } from '#contract/access.ts';
import type { Message } from '../../server/mail/demo-inbox.ts';
import type { Campaign, newCampaign } from '#contract/campaign.ts';
import { PennyweightError } from '#contract/error.ts';
import { pathTo, type BodyOf, type ParamsOf, type QueryOf, type ResponseOf, type Route } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import type { z } from 'zod';
import { createApp } from '../../server/app.ts';
import type { Config } from '../../server/config.ts';
import { openParts } from '../../server/parts.ts';
import { makeAccount } from '../../server/services/accounts.ts';
import type { App } from '../../server/services/context.ts';
import { closeReaders } from '../../server/services/reading-pool.ts';
import { setRoles } from '../../server/services/roles.ts';
import { createTestDatabase, type TestDatabase } from './database.ts';

export interface Order<T extends Route> {
  params?: ParamsOf<T>;
  query?: QueryOf<T>;
  body?: BodyOf<T>;
}

/** Somebody at the HTTP API: signed in, with a token, or neither. */
export interface Visitor {
  /** Any answer, for tests of refusals. */
  send<T extends Route>(route: T, order?: Order<T>): supertest.Test;
  /** The body of a successful answer, checked against the contract; a refusal becomes an error with its code. */
  call<T extends Route>(route: T, order?: Order<T>): Promise<ResponseOf<T>>;
  /** Outside the contract's routes: sign-in, uploads, pages. */
  http: ReturnType<typeof supertest.agent>;
}

export interface Person extends Visitor {
  id: string;
  name: string;
  email: string;
  password: string;
}

/** Roles by campaign's slug; `organisation` for those that hold everywhere. */
export type Roles = Record<string, MemberRole[]>;

export interface TestApp {
  url: string;
  server: Server;
  parts: App;
  web: ReturnType<typeof createApp>;
  database: TestDatabase;
  /** Administrator of the organisation, signed in. */
  founder: Person;
  visitor(headers?: Record<string, string>): Visitor;
  /** A person with an account and roles, signed in. */
  makePerson(roles?: Roles, name?: string): Promise<Person>;
  /** The same, without signing in. */
  makeAccountFor(roles?: Roles, name?: string): Promise<Omit<Person, keyof Visitor>>;
  signIn(account: { email: string; password: string }): Promise<Visitor>;
  makeCampaign(input?: Partial<z.input<typeof newCampaign>>): Promise<Campaign>;
  makeToken(owner: Visitor, input: { scopes: TokenScope[]; campaign?: string; days?: number }): Promise<Visitor & { id: string; secret: string }>;
  /** The newest letter to an address; waits for it, since some are sent after the answer. */
  letterTo(address: string, subject?: RegExp): Promise<Message>;
  close(): Promise<void>;
}

let serial = 0;
/** Unlike any other in this run, and in the form of a slug. */
export const unique = (word: string) => `${word}-${++serial}-${randomBytes(3).toString('hex')}`;

function visitorAt(url: string, headers: Record<string, string>): Visitor {
  const http = supertest.agent(url);
  http.set(headers);
  const send = <T extends Route>(route: T, order: Order<T> = {}) => {
    const request = http[route.method](pathTo(route, order.params, order.query));
    return order.body === undefined ? request : request.send(order.body as object);
  };
  return {
    http, send,
    async call(route, order) {
      const response = await send(route, order);
      if (response.status >= 400) throw new PennyweightError(response.body.code ?? 'internal', response.body.detail ?? `status ${response.status}: ${response.text}`, { status: response.status });
      return (route.media === null && route.status !== 204 ? route.response.parse(response.body) : response.body) as ResponseOf<typeof route>;
    },
  };
}

export async function createTestApp(options: { config?: Partial<Config>; log?: Logger; pages?: string } = {}): Promise<TestApp> {
  const database = await createTestDatabase();
  const storage = await mkdtemp(join(tmpdir(), 'pennyweight-test-'));
  // The address must be known before the application is made: sign-in accepts its own origin only.
  const server = createServer().listen(0, '127.0.0.1');
  await once(server, 'listening');
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const opened = await openParts({
    databaseUrl: database.url, storage, url, port: 0, host: '127.0.0.1', secret: randomBytes(32).toString('base64url'),
    demo: true, smtp: null, mailFrom: 'Pennyweight <pennyweight@localhost>', logLevel: 'silent', ...options.config,
  });
  const parts = options.log ? { ...opened, log: options.log } : opened;
  const web = createApp(parts, options.pages);
  server.on('request', (req, res) => void web(req, res));

  const visitor = (headers: Record<string, string> = {}) => visitorAt(url, { origin: url, ...headers });

  async function makeAccountFor(roles: Roles = {}, name = `Person ${++serial}`) {
    const account = { name, email: `${unique('person')}@example.org`, password: randomBytes(12).toString('base64url') };
    const made = await parts.db.transaction(async (tx) => {
      const person = await makeAccount(tx, null, account);
      for (const [slug, held] of Object.entries(roles)) {
        const campaign = slug === 'organisation' ? null : (await tx.query.campaign.findFirst({ where: (table, { eq }) => eq(table.slug, slug) }))!;
        await setRoles(tx, person.id, campaign?.id ?? null, held);
      }
      return person;
    });
    return { ...made, password: account.password };
  }

  async function signIn(account: { email: string; password: string }): Promise<Visitor> {
    const signedIn = visitor();
    const { status, text } = await signedIn.http.post('/api/auth/sign-in/email').send({ email: account.email, password: account.password });
    if (status !== 200) throw new PennyweightError('not-signed-in', `${account.email} could not sign in: ${text}`);
    return signedIn;
  }

  async function makePerson(roles?: Roles, name?: string): Promise<Person> {
    const account = await makeAccountFor(roles, name);
    return { ...account, ...(await signIn(account)) };
  }

  const founder = await makePerson({ organisation: ['administrator'] }, 'Founder');

  return {
    url, server, parts, web, database, founder, visitor, makePerson, makeAccountFor, signIn,
    makeCampaign: (input = {}) => founder.call(routes.createCampaign, { body: { slug: unique('campaign'), title: 'A campaign', ...input } }),
    async makeToken(owner, { scopes, campaign = null, days = 90 }) {
      const { id, secret } = await owner.call(routes.createToken, { body: { name: 'a token', scopes, campaign, days } });
      // A program sends no Origin and keeps no cookies.
      return { ...visitorAt(url, { authorization: `Bearer ${secret}` }), id, secret };
    },
    async letterTo(address, subject = /./) {
      for (let attempt = 0; attempt < 100; attempt += 1) {
        const letter = parts.inbox?.messages().find((each) => each.to === address && subject.test(each.subject));
        if (letter) return letter;
        await new Promise((resolve) => setTimeout(resolve, 20));
      }
      throw new PennyweightError('not-found', `No letter came for ${address}.`);
    },
    async close() {
      const closed = once(server, 'close');
      server.close();
      server.closeAllConnections();
      await closed;
      await closeReaders();
      await parts.close();
      await database.drop();
      await rm(storage, { recursive: true, force: true });
    },
  };
}
