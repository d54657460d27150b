/** Walks every route of the contract with every kind of caller, against the table in access-table.ts. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { MemberRole } from '#contract/access.ts';
import { memberRoles } from '#contract/access.ts';
import { routes, type RouteName } from '#contract/routes.ts';
import { createTestApp, unique, type Person, type TestApp, type Visitor } from '../setup/app.ts';
import { makeGustCampaign } from '../setup/gust-campaign.ts';
import { startWorker } from '../setup/worker.ts';
import { orderFor, orders, type Scene } from './access-orders.ts';
import { callers, mayCall, type CallerName } from './access-table.ts';

const names = Object.keys(routes) as RouteName[];
/** Nobody outside the campaign may see this in any answer. */
const mark = unique('known-to-members-only');
/** These give the campaign's title to whoever holds a secret, or are there in demo mode only. */
const byDesign = new Set<RouteName>(['viewInvitation', 'acceptInvitation', 'listInbox']);
const outside: CallerName[] = ['stranger', 'nobody', 'token:elsewhere'];

let app: TestApp;
let scene: Scene;
let visitors: Record<CallerName, Visitor>;

beforeAll(async () => {
  app = await createTestApp();
  const { slug: here } = await app.makeCampaign({ title: mark });
  const { slug: there } = await app.makeCampaign({ title: 'Elsewhere' });
  const member = (role: MemberRole) => app.makePerson({ [here]: [role] });
  const people = {} as Record<MemberRole, Person>;
  for (const role of memberRoles) people[role] = await member(role);
  await app.founder.call(routes.putMember, { params: { campaign: there, account: people.steward.id }, body: { roles: ['steward'] } });
  const { steward } = people;

  const worker = startWorker(app);
  const prepared = await makeGustCampaign(app, here, people)
    .then(async (gust) => {
      const [corrected, withdrawn, submitted] = await Promise.all([gust.handIn(), gust.handIn(), gust.submitDraft(gust.archive)]);
      return { gust, corrected, withdrawn, submitted };
    })
    // From here on jobs wait: what a walk over all callers changes is to stay as it is.
    .finally(() => worker.stop());
  const { gust, corrected, withdrawn, submitted } = prepared;
  const { findings } = await steward.call(routes.listArchiveFindings, { params: { archive: corrected.archive } });
  const caution = findings.find((finding) => finding.severity === 'caution')!;
  const draft = await people.modeler.call(routes.createDraft, { params: gust, body: { recipe: (await people.modeler.call(routes.getDraft, { params: { draft: submitted } })).recipe } });

  scene = {
    app, gust, contributor: people.contributor, account: (await app.makeAccountFor()).id,
    spare: { corrected: corrected.archive, withdrawn: withdrawn.archive, finding: caution.findingId, draft: draft.id, submitted },
  };
  const token = (scope: 'read' | 'pull' | 'hand-in') => app.makeToken(steward, { scopes: [scope], campaign: here });
  visitors = {
    ...people,
    'administrator*': await app.makePerson({ organisation: ['administrator'] }),
    'auditor*': await app.makePerson({ organisation: ['auditor'] }),
    stranger: await app.makePerson({ [there]: [...memberRoles] }),
    nobody: app.visitor(),
    'token:read': await token('read'),
    'token:pull': await token('pull'),
    'token:hand-in': await token('hand-in'),
    'token:elsewhere': await app.makeToken(steward, { scopes: ['read', 'pull', 'hand-in'], campaign: there }),
  };
}, 120_000);
afterAll(() => app.close());

describe('the access table', () => {
  it('has an entry for every route and none for a route that is gone', () => {
    expect(Object.keys(mayCall).sort()).toEqual([...names].sort());
    expect(Object.keys(orders).sort()).toEqual([...names].sort());
  });

  it('covers all that Express answers', () => {
    interface Layer { route?: { path: string; methods: Record<string, boolean> }; handle: { stack?: Layer[] } }
    const walk = (stack: Layer[]): string[] => stack.flatMap((layer) => (layer.route ? Object.keys(layer.route.methods).map((method) => `${method} ${layer.route!.path}`) : walk(layer.handle.stack ?? [])));
    const mounted = walk((app.web as unknown as { router: { stack: Layer[] } }).router.stack).sort();
    const known = names.map((name) => `${routes[name].method} ${routes[name].path}`);
    // Sign-in, uploads (intake.test.ts), the answer to unknown addresses, and the pages.
    const others = ['/api/auth/{*any}', '/api/uploads{/*id}', '/api{/*any}', '/{*spa}'];
    expect(mounted.filter((route) => !others.includes(route.split(' ')[1]))).toEqual(known.sort());
  });
});

async function expectAnswer(name: RouteName, caller: CallerName): Promise<void> {
  const visitor = visitors[caller];
  const { status, text } = await visitor.send(routes[name], await orderFor(name, scene, visitor));
  const what = `${caller} got ${status} ${text?.slice(0, 300)}`;
  if (mayCall[name].includes(caller)) {
    expect.soft([401, 403, 404], `refused: ${what}`).not.toContain(status);
    expect.soft(status, what).toBeLessThan(500);
  } else {
    expect.soft(caller === 'nobody' ? [401] : [403, 404], `allowed: ${what}`).toContain(status);
  }
  if (outside.includes(caller) && !byDesign.has(name)) expect.soft(text ?? '', what).not.toContain(mark);
}

describe('who may call', () => {
  it.each(names)('%s', async (name) => {
    expect.hasAssertions();
    // Reading changes nothing, so all can read at once; changes come one after the other.
    if (routes[name].method === 'get') await Promise.all(callers.map((caller) => expectAnswer(name, caller)));
    else for (const caller of callers) await expectAnswer(name, caller);
  });
});
