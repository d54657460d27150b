/** Roles, actions and subjects, and the abilities that follow from them. Server and client build the same ability. */
import { AbilityBuilder, createMongoAbility, type MongoAbility, type MongoQuery, type RawRuleOf } from '@casl/ability';
import { z } from 'zod';

export const memberRoles = ['contributor', 'steward', 'modeler', 'auditor', 'administrator'] as const;
export const memberRole = z.enum(memberRoles);
export type MemberRole = z.infer<typeof memberRole>;

export const tokenScopes = ['read', 'pull', 'hand-in'] as const;
export const tokenScope = z.enum(tokenScopes);
export type TokenScope = z.infer<typeof tokenScope>;

export type Action =
  | 'read' | 'create' | 'update' | 'delete' | 'hand-in' | 'correct' | 'check' | 'waive' | 'build' | 'submit' | 'review'
  | 'withdraw' | 'pull' | 'cancel' | 'verify';
export type Subject =
  | 'Campaign' | 'Membership' | 'Delivery' | 'Archive' | 'SavedReading' | 'Finding' | 'Dataset' | 'Draft' | 'Release' | 'Pull'
  | 'AuditEntry' | 'Job' | 'User' | 'Invitation' | 'Token' | 'Storage';
export type AppAbility = MongoAbility<[Action, Subject | Record<string, unknown>]>;
export type AbilityRule = RawRuleOf<AppAbility>;

/** `campaignId` null: the role holds in every campaign of the organisation. */
export interface RoleAssignment {
  campaignId: string | null;
  role: MemberRole;
}
export interface Principal {
  userId: string;
  roles: RoleAssignment[];
  /** null for a session; a token narrows what its owner may do */
  token: { scopes: TokenScope[]; campaignId: string | null } | null;
}

/** What each role may do inside its campaign. */
const grants: Record<MemberRole, [Action, Subject][]> = {
  contributor: [
    ['read', 'Campaign'], ['read', 'Archive'], ['read', 'Finding'], ['read', 'Dataset'], ['read', 'Release'], ['read', 'SavedReading'],
    ['read', 'Job'], ['hand-in', 'Delivery'], ['read', 'Delivery'], ['read', 'Membership'],
  ],
  steward: [
    ['read', 'Campaign'], ['read', 'Archive'], ['read', 'Finding'], ['read', 'Dataset'], ['read', 'Draft'], ['read', 'Release'],
    ['read', 'SavedReading'], ['read', 'Job'], ['read', 'Delivery'], ['read', 'Membership'], ['read', 'Pull'], ['read', 'AuditEntry'],
    ['hand-in', 'Delivery'], ['correct', 'Archive'], ['check', 'Archive'], ['withdraw', 'Archive'], ['waive', 'Finding'],
    ['create', 'Dataset'], ['update', 'Dataset'], ['create', 'Draft'], ['update', 'Draft'], ['build', 'Draft'], ['submit', 'Draft'],
    ['review', 'Draft'], ['withdraw', 'Release'], ['pull', 'Release'], ['pull', 'Archive'], ['cancel', 'Job'],
  ],
  modeler: [
    ['read', 'Campaign'], ['read', 'Archive'], ['read', 'Finding'], ['read', 'Dataset'], ['read', 'Draft'], ['read', 'Release'],
    ['read', 'SavedReading'], ['read', 'Job'], ['read', 'Membership'], ['create', 'Dataset'], ['create', 'Draft'], ['pull', 'Release'],
  ],
  auditor: [
    ['read', 'Campaign'], ['read', 'Archive'], ['read', 'Finding'], ['read', 'Dataset'], ['read', 'Draft'], ['read', 'Release'],
    ['read', 'SavedReading'], ['read', 'Job'], ['read', 'Delivery'], ['read', 'Membership'], ['read', 'Pull'], ['read', 'AuditEntry'],
    ['verify', 'AuditEntry'],
  ],
  administrator: [
    ['read', 'Campaign'], ['read', 'Archive'], ['read', 'Finding'], ['read', 'Dataset'], ['read', 'Draft'], ['read', 'Release'],
    ['read', 'SavedReading'], ['read', 'Job'], ['read', 'Delivery'], ['read', 'Membership'], ['read', 'Pull'], ['read', 'AuditEntry'],
    ['verify', 'AuditEntry'], ['update', 'Campaign'], ['create', 'Membership'], ['update', 'Membership'], ['delete', 'Membership'],
    ['create', 'Invitation'], ['read', 'Invitation'], ['delete', 'Invitation'], ['cancel', 'Job'],
  ],
};

/** What a member may do with objects of their own. */
const ownGrants: Record<MemberRole, [Action, Subject, 'createdBy'][]> = {
  contributor: [['correct', 'Archive', 'createdBy'], ['check', 'Archive', 'createdBy'], ['pull', 'Archive', 'createdBy'], ['cancel', 'Job', 'createdBy']],
  steward: [],
  modeler: [['update', 'Draft', 'createdBy'], ['build', 'Draft', 'createdBy'], ['submit', 'Draft', 'createdBy'], ['cancel', 'Job', 'createdBy']],
  auditor: [],
  administrator: [],
};

/** Only for the organisation as a whole. */
const organisationGrants: Partial<Record<MemberRole, [Action, Subject][]>> = {
  administrator: [['create', 'Campaign'], ['read', 'User'], ['update', 'User'], ['read', 'Storage']],
  auditor: [['read', 'User'], ['read', 'Storage']],
};

const scopeActions: Record<TokenScope, Action[]> = { read: ['read'], pull: ['read', 'pull'], 'hand-in': ['read', 'hand-in'] };

/**
 * The ability of a person (deny by default). Four eyes: nobody reviews a draft that names them among its `makers`
 * (who built it, who handed in an archive that it contains).
 */
export function abilityFor(principal: Principal): AppAbility {
  const { can, cannot, build } = new AbilityBuilder<AppAbility>(createMongoAbility);
  const { userId, token } = principal;
  const allowed = token ? new Set(token.scopes.flatMap((scope) => scopeActions[scope])) : null;
  const permitted = (action: Action) => allowed === null || allowed.has(action);

  for (const { role, campaignId } of principal.roles) {
    if (token?.campaignId && campaignId !== null && campaignId !== token.campaignId) continue;
    const where = campaignId ?? token?.campaignId ?? null;
    const inCampaign: MongoQuery = where === null ? {} : { campaignId: where };
    for (const [action, subject] of grants[role]) if (permitted(action)) can(action, subject, inCampaign);
    for (const [action, subject, key] of ownGrants[role]) if (permitted(action)) can(action, subject, { ...inCampaign, [key]: userId } as MongoQuery);
    if (campaignId === null && !token) for (const [action, subject] of organisationGrants[role] ?? []) can(action, subject);
  }
  if (!token) {
    can('read', 'Token', { userId });
    can('create', 'Token', { userId });
    can('delete', 'Token', { userId });
    can('cancel', 'Delivery', { createdBy: userId });
  }
  if (permitted('hand-in')) can('cancel', 'Delivery', { createdBy: userId });
  if (permitted('read')) can('read', 'Delivery', { createdBy: userId });
  cannot('review', 'Draft', { makers: userId });
  return build({ detectSubjectType: detectSubject });
}

/** The same ability from the rules that the server sent. */
export function abilityFromRules(rules: AbilityRule[]): AppAbility {
  return createMongoAbility<AppAbility>(rules, { detectSubjectType: detectSubject });
}

/** Objects that are asked about carry their subject's name in `subject` (see `about`). */
function detectSubject(object: Record<string, unknown>): Subject {
  return object.subject as Subject;
}

/** An object to ask the ability about: ability.can('review', about('Draft', {campaignId, makers})). */
export function about(subject: Subject, facts: Record<string, unknown>): Record<string, unknown> {
  return { ...facts, subject };
}
