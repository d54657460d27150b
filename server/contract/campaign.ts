/** Campaigns: the unit of access, with fields, parameters, limits, members and check thresholds. */
import { z } from 'zod';
import { memberRole } from './access.ts';
import { checkId, checkPolicy } from './finding.ts';
import { defineRoute } from './route.ts';
import { findingCounts, id, name, person, slug, timestamp } from './shape.ts';

const limit = z.number().finite().nullable().default(null);
const ordered = (range: { min: number | null; max: number | null }) => range.min === null || range.max === null || range.min <= range.max;

export const campaignField = z
  .object({ name, unit: z.string().trim().max(40).nullable().default(null), min: limit, max: limit, required: z.boolean().default(true) })
  .refine(ordered, { message: 'the lower limit is above the upper one', path: ['max'] });
export const campaignParameter = z
  .object({ name, unit: z.string().trim().max(40).nullable().default(null), min: limit, max: limit })
  .refine(ordered, { message: 'the range starts above its end', path: ['max'] });
export type CampaignField = z.infer<typeof campaignField>;
export type CampaignParameter = z.infer<typeof campaignParameter>;

/** What a campaign can be given, without defaults: an update changes only what it names. */
const settings = {
  title: name,
  description: z.string().trim().max(4000),
  quotaBytes: z.number().int().positive(),
  fields: z.array(campaignField).max(100),
  parameters: z.array(campaignParameter).max(50),
  policy: checkPolicy,
  handlingLabel: z.string().trim().max(80),
  contact: z.string().trim().max(200),
  licence: z.string().trim().max(200),
};

export const newCampaign = z.object({
  slug,
  ...settings,
  description: settings.description.default(''),
  quotaBytes: settings.quotaBytes.default(200 * 2 ** 30),
  fields: settings.fields.default([]),
  parameters: settings.parameters.default([]),
  policy: settings.policy.default({ thresholds: {} }),
  handlingLabel: settings.handlingLabel.default('internal'),
  contact: settings.contact.default(''),
  licence: settings.licence.default(''),
});
export const campaignUpdate = z.object(settings).partial().extend({ version: z.number().int(), reason: z.string().trim().max(2000).optional() });

export const campaign = newCampaign.extend({
  id, version: z.number().int(), createdAt: timestamp, usedBytes: z.number(),
  counts: z.object({ archives: z.number(), datasets: z.number(), releases: z.number(), members: z.number() }),
  findings: findingCounts,
  myRoles: z.array(memberRole),
});
export type Campaign = z.infer<typeof campaign>;

export const member = z.object({ person, email: z.string(), roles: z.array(memberRole), since: timestamp });
export type Member = z.infer<typeof member>;

/** The catalogue of checks as the settings page shows it. */
export const checkDescription = z.object({
  id: checkId, severity: z.string(), title: z.string(), source: z.string(),
  thresholds: z.array(z.object({ name: z.string(), default: z.number(), unit: z.string(), meaning: z.string() })),
});

const inCampaign = z.object({ campaign: slug });

export const campaignRoutes = {
  listCampaigns: defineRoute({ method: 'get', path: '/api/campaigns', summary: 'Campaigns that I may see', access: 'signed-in', scope: 'read', response: z.object({ campaigns: z.array(campaign) }) }),
  createCampaign: defineRoute({ method: 'post', path: '/api/campaigns', summary: 'Open a campaign', access: { action: 'create', subject: 'Campaign' }, body: newCampaign, response: campaign, status: 201 }),
  getCampaign: defineRoute({ method: 'get', path: '/api/campaigns/:campaign', summary: 'One campaign', access: { action: 'read', subject: 'Campaign' }, scope: 'read', params: inCampaign, response: campaign }),
  updateCampaign: defineRoute({ method: 'patch', path: '/api/campaigns/:campaign', summary: 'Change fields, parameters, thresholds, quota', access: { action: 'update', subject: 'Campaign' }, params: inCampaign, body: campaignUpdate, response: campaign }),
  listMembers: defineRoute({ method: 'get', path: '/api/campaigns/:campaign/members', summary: 'Members and their roles', access: { action: 'read', subject: 'Membership' }, params: inCampaign, response: z.object({ members: z.array(member) }) }),
  putMember: defineRoute({ method: 'put', path: '/api/campaigns/:campaign/members/:account', summary: 'Set the roles of a member', access: { action: 'update', subject: 'Membership' }, params: inCampaign.extend({ account: z.string() }), body: z.object({ roles: z.array(memberRole).min(1, 'choose at least one role') }), response: member }),
  removeMember: defineRoute({ method: 'delete', path: '/api/campaigns/:campaign/members/:account', summary: 'Remove a member', access: { action: 'delete', subject: 'Membership' }, params: inCampaign.extend({ account: z.string() }), response: z.null(), status: 204 }),
  listChecks: defineRoute({ method: 'get', path: '/api/checks', summary: 'The check catalogue with thresholds and sources', access: 'signed-in', scope: 'read', response: z.object({ checks: z.array(checkDescription) }) }),
};
