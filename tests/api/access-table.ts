/**
 * Who may do what: one line a route, written by hand from the specification (job.md, curation.md) and not from the code that decides.
 * The object is always one of the campaign "here": an archive handed in by its contributor, a draft of its modeler, and so on.
 *
 * In a campaign: contributor, steward, modeler, auditor, administrator. In the organisation: administrator*, auditor*.
 * stranger: holds every role in another campaign. nobody: signed out. Tokens of this campaign's steward: read, pull, hand-in (one scope
 * each) and elsewhere (all scopes, but for the other campaign).
 */
import type { RouteName } from '#contract/routes.ts';

export const callers = [
  'contributor', 'steward', 'modeler', 'auditor', 'administrator', 'administrator*', 'auditor*', 'stranger', 'nobody',
  'token:read', 'token:pull', 'token:hand-in', 'token:elsewhere',
] as const;
export type CallerName = (typeof callers)[number];

const team: CallerName[] = ['contributor', 'steward', 'modeler', 'auditor', 'administrator', 'administrator*', 'auditor*'];
const sessions: CallerName[] = [...team, 'stranger'];
const tokens: CallerName[] = ['token:read', 'token:pull', 'token:hand-in'];
/** Reading what belongs to a campaign: its members and their tokens. */
const readers: CallerName[] = [...team, ...tokens];
/** Lists of what one may see, for anybody who is known; access.test.ts sees to it that nothing of "here" is in a stranger's. */
const known: CallerName[] = [...sessions, ...tokens, 'token:elsewhere'];
const everybody: CallerName[] = [...callers];

const administrators: CallerName[] = ['administrator', 'administrator*'];
const overseers: CallerName[] = ['auditor', 'administrator', 'administrator*', 'auditor*'];
const organisation: CallerName[] = ['administrator*', 'auditor*'];
const draftReaders: CallerName[] = ['steward', 'modeler', ...overseers, ...tokens];

export const mayCall: Record<RouteName, CallerName[]> = {
  getMe: known,
  listAccounts: organisation,
  updateAccount: ['administrator*'],
  listInvitations: sessions,
  createInvitation: administrators,
  revokeInvitation: administrators,
  viewInvitation: everybody,
  acceptInvitation: everybody,
  listTokens: sessions,
  createToken: sessions,
  revokeToken: sessions,
  listInbox: everybody,

  listCampaigns: known,
  createCampaign: ['administrator*'],
  getCampaign: readers,
  updateCampaign: administrators,
  listMembers: team,
  putMember: administrators,
  removeMember: administrators,
  listChecks: known,

  createDelivery: ['contributor', 'steward', 'token:hand-in'],
  listDeliveries: [...team, 'token:hand-in'],
  getDelivery: ['contributor', 'steward', ...overseers, 'token:hand-in'],
  cancelDelivery: ['contributor'],
  listArchives: readers,
  getArchive: readers,
  withdrawArchive: ['steward'],
  getArchiveReading: readers,
  tryReading: ['contributor', 'steward'],
  putArchiveReading: ['contributor', 'steward'],
  putRunParameters: ['contributor', 'steward'],
  recheckArchive: ['contributor', 'steward'],
  listSavedReadings: readers,
  listArchiveFindings: readers,
  getArchiveStatistics: readers,
  getArchiveBeam: readers,
  getArchiveWeights: readers,
  getArchiveSnapshot: readers,
  getArchiveFile: ['contributor', 'steward', 'token:pull'],
  waiveFinding: ['steward'],
  revokeWaiver: ['steward'],

  listDatasets: known,
  createDataset: ['steward', 'modeler'],
  getDataset: readers,
  createDraft: ['steward', 'modeler'],
  getDraft: draftReaders,
  putRecipe: ['steward', 'modeler'],
  previewRecipe: ['steward', 'modeler'],
  buildDraft: ['steward', 'modeler'],
  listDraftFindings: draftReaders,
  getDraftBeam: draftReaders,
  getDraftValues: draftReaders,
  submitDraft: ['steward', 'modeler'],
  returnDraft: ['steward'],
  approveDraft: ['steward'],
  listReviews: sessions,

  getRelease: readers,
  getReleaseBeam: readers,
  getReleaseValues: readers,
  getReleaseFile: ['steward', 'modeler', 'token:pull'],
  getReleaseMatrix: ['steward', 'modeler', 'token:pull'],
  withdrawRelease: ['steward'],
  listPulls: ['steward', ...overseers],

  getHealth: everybody,
  getDesk: sessions,
  listJobs: sessions,
  getJob: readers,
  cancelJob: ['contributor', 'steward', ...administrators],
  // The stranger and the token of the other campaign read that one's entries.
  listAudit: ['steward', ...overseers, 'stranger', ...tokens, 'token:elsewhere'],
  exportAudit: ['steward', ...overseers, 'stranger', ...tokens, 'token:elsewhere'],
  verifyAudit: [...overseers, 'stranger'],
  getStorage: organisation,
};
