/** Accounts, invitations and personal tokens. Sign-in itself is at /api/auth (better-auth). */
import { z } from 'zod';
import { memberRole, tokenScope, type AbilityRule } from './access.ts';
import { defineRoute } from './route.ts';
import { id, name, slug, timestamp } from './shape.ts';

export const password = z.string().min(12, 'use at least 12 characters').max(128);
export const signIn = z.object({ email: z.email('give your e-mail address'), password: z.string().min(1, 'give your password') });
export const passwordResetRequest = z.object({ email: z.email('give your e-mail address') });
export const passwordReset = z.object({ newPassword: password, token: z.string() });

export const me = z.object({
  user: z.object({ id: z.string(), name: z.string(), email: z.string() }),
  roles: z.array(z.object({ campaignId: z.string().nullable(), campaign: z.string().nullable(), role: memberRole })),
  rules: z.array(z.custom<AbilityRule>()),
  demo: z.boolean(),
});
export type Me = z.infer<typeof me>;

export const account = z.object({
  id: z.string(), name: z.string(), email: z.string(), active: z.boolean(), createdAt: timestamp,
  roles: z.array(z.object({ campaign: z.string().nullable(), role: memberRole })),
});
export type Account = z.infer<typeof account>;

export const invitation = z.object({
  id, email: z.string(), campaign: z.string().nullable(), roles: z.array(memberRole), state: z.enum(['open', 'accepted', 'revoked', 'expired']),
  invitedBy: z.string(), createdAt: timestamp, expiresAt: timestamp,
});
export type Invitation = z.infer<typeof invitation>;
export const newInvitation = z.object({ email: z.email(), campaign: slug.nullable().default(null), roles: z.array(memberRole).min(1, 'choose at least one role') });
export const invitationView = z.object({ email: z.string(), campaign: z.string().nullable(), roles: z.array(memberRole), invitedBy: z.string(), expiresAt: timestamp, hasAccount: z.boolean() });
export const acceptInvitation = z.object({ name, password });

export const token = z.object({
  id: z.string(), name: z.string(), start: z.string(), scopes: z.array(tokenScope), campaign: z.string().nullable(),
  createdAt: timestamp, expiresAt: timestamp.nullable(), lastUsedAt: timestamp.nullable(),
});
export type Token = z.infer<typeof token>;
export const newToken = z.object({ name, scopes: z.array(tokenScope).min(1, 'choose at least one scope'), campaign: slug.nullable().default(null), days: z.number().int().min(1).max(365).default(90) });
export const createdToken = token.extend({ secret: z.string() });

export const message = z.object({ id: z.string(), at: timestamp, to: z.string(), from: z.string(), subject: z.string(), text: z.string(), links: z.array(z.string()) });

export const accountRoutes = {
  getMe: defineRoute({ method: 'get', path: '/api/me', summary: 'Who I am and what I may do', access: 'signed-in', scope: 'read', response: me }),
  listAccounts: defineRoute({ method: 'get', path: '/api/accounts', summary: 'All accounts', access: { action: 'read', subject: 'User' }, response: z.object({ accounts: z.array(account) }) }),
  updateAccount: defineRoute({
    method: 'patch', path: '/api/accounts/:account', summary: 'Set organisation-wide roles, or close an account', access: { action: 'update', subject: 'User' },
    params: z.object({ account: z.string() }), body: z.object({ roles: z.array(memberRole).optional(), active: z.boolean().optional() }), response: account,
  }),
  listInvitations: defineRoute({ method: 'get', path: '/api/invitations', summary: 'Invitations that I may see', access: 'signed-in', query: z.object({ campaign: slug.optional() }), response: z.object({ invitations: z.array(invitation) }) }),
  createInvitation: defineRoute({ method: 'post', path: '/api/invitations', summary: 'Invite a person by e-mail', access: { action: 'create', subject: 'Invitation' }, body: newInvitation, response: invitation, status: 201 }),
  revokeInvitation: defineRoute({ method: 'delete', path: '/api/invitations/:invitation', summary: 'Take an invitation back', access: { action: 'delete', subject: 'Invitation' }, params: z.object({ invitation: id }), response: z.null(), status: 204 }),
  viewInvitation: defineRoute({ method: 'get', path: '/api/join/:secret', summary: 'What an invitation offers', access: 'public', params: z.object({ secret: z.string() }), response: invitationView }),
  acceptInvitation: defineRoute({ method: 'post', path: '/api/join/:secret', summary: 'Accept an invitation and make the account', access: 'public', params: z.object({ secret: z.string() }), body: acceptInvitation, response: z.object({ email: z.string() }), status: 201 }),
  listTokens: defineRoute({ method: 'get', path: '/api/tokens', summary: 'My personal tokens', access: 'signed-in', response: z.object({ tokens: z.array(token) }) }),
  createToken: defineRoute({ method: 'post', path: '/api/tokens', summary: 'Make a personal token; its secret is shown once', access: 'signed-in', body: newToken, response: createdToken, status: 201 }),
  revokeToken: defineRoute({ method: 'delete', path: '/api/tokens/:token', summary: 'Revoke a personal token', access: 'signed-in', params: z.object({ token: z.string() }), response: z.null(), status: 204 }),
  listInbox: defineRoute({ method: 'get', path: '/api/demo-inbox', summary: 'Mail caught by the demo inbox (demo mode only)', access: 'public', response: z.object({ messages: z.array(message) }) }),
};
