/** Accounts, invitations, tokens, and the demo's inbox. */
import { Router } from 'express';
import { PennyweightError } from '#contract/error.ts';
import { routes } from '#contract/routes.ts';
import { describeMe, listAccounts, updateAccount } from '../../services/accounts.ts';
import type { App } from '../../services/context.ts';
import { acceptInvitation, createInvitation, listInvitations, revokeInvitation, viewInvitation } from '../../services/invitations.ts';
import { createToken, listTokens, revokeToken } from '../../services/tokens.ts';
import { mount } from '../mount.ts';

export function accountRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.getMe, ({ caller }) => describeMe(app, caller));
  mount(router, app, routes.listAccounts, async ({ caller }) => ({ accounts: await listAccounts(app, caller) }));
  mount(router, app, routes.updateAccount, ({ caller, params, body }) => updateAccount(app, caller, params.account, body));
  mount(router, app, routes.listInvitations, async ({ caller, query }) => ({ invitations: await listInvitations(app, caller, query.campaign) }));
  mount(router, app, routes.createInvitation, ({ caller, body }) => createInvitation(app, caller, body));
  mount(router, app, routes.revokeInvitation, async ({ caller, params }) => { await revokeInvitation(app, caller, params.invitation); });
  mount(router, app, routes.viewInvitation, ({ params }) => viewInvitation(app, params.secret));
  mount(router, app, routes.acceptInvitation, ({ params, body }) => acceptInvitation(app, params.secret, body));
  mount(router, app, routes.listTokens, async ({ caller }) => ({ tokens: await listTokens(app, caller) }));
  mount(router, app, routes.createToken, ({ caller, body }) => createToken(app, caller, body));
  mount(router, app, routes.revokeToken, async ({ caller, params }) => { await revokeToken(app, caller, params.token); });
  mount(router, app, routes.listInbox, async () => {
    if (!app.inbox) throw new PennyweightError('not-found', 'There is no demo inbox: mail goes out by SMTP.');
    return { messages: app.inbox.messages() };
  });
  return router;
}
