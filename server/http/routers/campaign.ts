/** Campaigns, members, and the check catalogue. */
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { createCampaign, getCampaign, listCampaigns, listChecks, updateCampaign } from '../../services/campaigns.ts';
import type { App } from '../../services/context.ts';
import { listMembers, putMember, removeMember } from '../../services/members.ts';
import { mount } from '../mount.ts';

export function campaignRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.listCampaigns, async ({ caller }) => ({ campaigns: await listCampaigns(app, caller) }));
  mount(router, app, routes.createCampaign, ({ caller, body }) => createCampaign(app, caller, body));
  mount(router, app, routes.getCampaign, ({ caller, params }) => getCampaign(app, caller, params.campaign));
  mount(router, app, routes.updateCampaign, ({ caller, params, body }) => updateCampaign(app, caller, params.campaign, body));
  mount(router, app, routes.listMembers, async ({ caller, params }) => ({ members: await listMembers(app, caller, params.campaign) }));
  mount(router, app, routes.putMember, ({ caller, params, body }) => putMember(app, caller, params.campaign, params.account, body.roles));
  mount(router, app, routes.removeMember, async ({ caller, params }) => { await removeMember(app, caller, params.campaign, params.account); });
  mount(router, app, routes.listChecks, async () => ({ checks: listChecks() }));
  return router;
}
