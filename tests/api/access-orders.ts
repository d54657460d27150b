/** A valid order for each route of the contract, on objects of the campaign; destructive ones get an object of their own each time. */
import { routes, type RouteName } from '#contract/routes.ts';
import { unique, type Order, type Person, type TestApp, type Visitor } from '../setup/app.ts';
import { gustRecipe, type GustCampaign } from '../setup/gust-campaign.ts';
import type { Route } from '#contract/route.ts';

export interface Scene {
  app: TestApp;
  gust: GustCampaign;
  /** archives of the contributor for what would spoil the first one */
  spare: { corrected: string; withdrawn: string; finding: string; draft: string; submitted: string };
  contributor: Person;
  account: string;
}

type Orders = { [Name in RouteName]: (scene: Scene, visitor: Visitor) => Promise<Order<(typeof routes)[Name]>> | Order<(typeof routes)[Name]> };

const reason = 'As the test demands.';
const announced = () => ({ run: unique('run'), files: [{ name: 'a.h5', bytes: 10 }] });
const inCampaign = ({ gust }: Scene) => ({ params: { campaign: gust.campaign } });
const ofArchive = ({ gust }: Scene) => ({ params: { archive: gust.archive } });
const ofReleased = ({ gust }: Scene) => ({ params: { draft: gust.released } });
const ofDraft = ({ spare }: Scene) => ({ params: { draft: spare.draft } });
const ofDataset = ({ gust }: Scene) => ({ params: { campaign: gust.campaign, dataset: gust.dataset } });
const ofRelease = ({ gust }: Scene) => ({ params: { campaign: gust.campaign, dataset: gust.dataset, version: gust.version } });
const nothing = () => ({});

async function invite({ app, gust }: Scene): Promise<{ id: string; secret: string }> {
  const email = `${unique('guest')}@example.org`;
  const { id } = await app.founder.call(routes.createInvitation, { body: { email, campaign: gust.campaign, roles: ['modeler'] } });
  return { id, secret: new URL((await app.letterTo(email)).links[0]).pathname.split('/').at(-1)! };
}

const readingOf = async ({ app, spare }: Scene) => (await app.founder.call(routes.getArchiveReading, { params: { archive: spare.corrected } })).reading;

export const orders: Orders = {
  getMe: nothing,
  listAccounts: nothing,
  updateAccount: ({ account }) => ({ params: { account }, body: { active: true } }),
  listInvitations: nothing,
  createInvitation: ({ gust }) => ({ body: { email: `${unique('guest')}@example.org`, campaign: gust.campaign, roles: ['modeler'] } }),
  revokeInvitation: async (scene) => ({ params: { invitation: (await invite(scene)).id } }),
  viewInvitation: async (scene) => ({ params: { secret: (await invite(scene)).secret } }),
  acceptInvitation: async (scene) => ({ params: { secret: (await invite(scene)).secret }, body: { name: 'Guest', password: 'a long enough password' } }),
  listTokens: nothing,
  createToken: () => ({ body: { name: 'one more', scopes: ['read'] } }),
  revokeToken: async (_, visitor) => {
    const made = await visitor.send(routes.createToken, { body: { name: 'to be revoked', scopes: ['read'] } });
    return { params: { token: made.status === 201 ? made.body.id : 'none' } };
  },
  listInbox: nothing,

  listCampaigns: nothing,
  createCampaign: () => ({ body: { slug: unique('campaign'), title: 'Another' } }),
  getCampaign: inCampaign,
  updateCampaign: async ({ app, gust }) => ({ params: { campaign: gust.campaign }, body: { version: (await app.founder.call(routes.getCampaign, { params: gust })).version, contact: 'Somebody' } }),
  listMembers: inCampaign,
  putMember: ({ gust, account }) => ({ params: { campaign: gust.campaign, account }, body: { roles: ['contributor'] } }),
  removeMember: async ({ app, gust, account }) => {
    await app.founder.call(routes.putMember, { params: { campaign: gust.campaign, account }, body: { roles: ['contributor'] } });
    return { params: { campaign: gust.campaign, account } };
  },
  listChecks: nothing,

  createDelivery: (scene) => ({ ...inCampaign(scene), body: announced() }),
  listDeliveries: inCampaign,
  getDelivery: ({ gust }) => ({ params: { delivery: gust.delivery } }),
  cancelDelivery: async (scene) => ({ params: { delivery: (await scene.contributor.call(routes.createDelivery, { ...inCampaign(scene), body: announced() })).id } }),
  listArchives: inCampaign,
  getArchive: ofArchive,
  withdrawArchive: ({ spare }) => ({ params: { archive: spare.withdrawn }, body: { reason } }),
  getArchiveReading: ofArchive,
  tryReading: async (scene) => ({ params: { archive: scene.spare.corrected }, body: { reading: await readingOf(scene) } }),
  putArchiveReading: async (scene) => ({ params: { archive: scene.spare.corrected }, body: { reading: await readingOf(scene), reason } }),
  putRunParameters: ({ spare }) => ({ params: { archive: spare.corrected }, body: { parameters: { re: 100 }, reason } }),
  recheckArchive: ({ spare }) => ({ params: { archive: spare.corrected } }),
  listSavedReadings: inCampaign,
  listArchiveFindings: ofArchive,
  getArchiveStatistics: ofArchive,
  getArchiveBeam: ofArchive,
  getArchiveWeights: ofArchive,
  getArchiveSnapshot: (scene) => ({ ...ofArchive(scene), query: { field: 'u', index: 0 } }),
  getArchiveFile: ({ gust }) => ({ params: { archive: gust.archive, position: 0 } }),
  waiveFinding: ({ spare }) => ({ params: { finding: spare.finding }, body: { reason } }),
  revokeWaiver: ({ spare }) => ({ params: { finding: spare.finding } }),

  listDatasets: nothing,
  createDataset: (scene) => ({ ...inCampaign(scene), body: { slug: unique('dataset'), title: 'Another' } }),
  getDataset: ofDataset,
  createDraft: (scene) => ({ ...ofDataset(scene), body: { recipe: gustRecipe([scene.gust.archive]) } }),
  getDraft: ofReleased,
  putRecipe: async (scene) => ({ ...ofDraft(scene), body: { recipe: gustRecipe([scene.gust.archive]), version: (await scene.app.founder.call(routes.getDraft, ofDraft(scene))).version } }),
  previewRecipe: (scene) => ({ ...inCampaign(scene), body: { recipe: gustRecipe([scene.gust.archive]) } }),
  buildDraft: ofDraft,
  listDraftFindings: ofReleased,
  getDraftBeam: ofReleased,
  getDraftValues: (scene) => ({ ...ofReleased(scene), query: { of: 'column', index: 0, field: 'u' } }),
  submitDraft: (scene) => ({ ...ofDraft(scene), body: {} }),
  returnDraft: ({ spare }) => ({ params: { draft: spare.submitted }, body: { reason } }),
  approveDraft: ({ spare }) => ({ params: { draft: spare.submitted }, body: { licence: 'CC0-1.0', handlingLabel: 'internal', contact: 'Somebody' } }),
  listReviews: nothing,

  getRelease: ofRelease,
  getReleaseBeam: ofRelease,
  getReleaseValues: (scene) => ({ ...ofRelease(scene), query: { of: 'mean', field: 'u' } }),
  getReleaseFile: ({ gust }) => ({ params: { campaign: gust.campaign, dataset: gust.dataset, version: gust.version, path: 'bagit.txt' } }),
  getReleaseMatrix: (scene) => ({ ...ofRelease(scene), query: { columns: '0:2' } }),
  withdrawRelease: (scene) => ({ ...ofRelease(scene), body: { reason } }),
  listPulls: ofRelease,

  getHealth: nothing,
  getDesk: nothing,
  listJobs: nothing,
  getJob: ({ gust }) => ({ params: { job: gust.job } }),
  cancelJob: ({ gust }) => ({ params: { job: gust.job } }),
  listAudit: (scene) => ({ query: { campaign: scene.gust.campaign } }),
  exportAudit: (scene) => ({ query: { campaign: scene.gust.campaign } }),
  verifyAudit: nothing,
  getStorage: nothing,
};

/** The order of a route whose name is not known before. */
export async function orderFor(name: RouteName, scene: Scene, visitor: Visitor): Promise<Order<Route>> {
  return (orders[name] as (scene: Scene, visitor: Visitor) => Promise<Order<Route>>)(scene, visitor);
}
