/** better-auth: e-mail and password, server-side sessions in our database, reset by e-mail. Accounts are made by invitation only. */
import { betterAuth } from 'better-auth';
import { drizzleAdapter } from 'better-auth/adapters/drizzle';
import { APIError, createAuthMiddleware } from 'better-auth/api';
import { eq } from 'drizzle-orm';
import type { Logger } from 'pino';
import * as schema from '../db/schema/index.ts';
import { passwordResetLetter } from '../mail/letters.ts';
import type { Config } from '../config.ts';
import type { Database } from '../db/database.ts';
import type { Mailer } from '../mail/mailer.ts';

/** The peer's address as Express found it; the library must not believe what a client says of itself. */
export const addressHeader = 'x-peer-address';

const day = 24 * 60 * 60;

export { fromNodeHeaders } from 'better-auth/node';

export type SignInEvent = 'account.sign-in' | 'account.sign-in-refused' | 'account.sign-out' | 'account.password-reset-requested' | 'account.password-reset';

export interface AuthParts {
  config: Config;
  db: Database;
  mailer: Mailer;
  log: Logger;
  /** keeps what happened in the audit log */
  record(event: SignInEvent, person: { id: string | null; name?: string; email: string }, requestId: string | null): Promise<void>;
}

export function createAuth({ config, db, mailer, log, record }: AuthParts) {
  return betterAuth({
    baseURL: config.url,
    basePath: '/api/auth',
    secret: config.secret,
    trustedOrigins: [config.url],
    telemetry: { enabled: false },
    database: drizzleAdapter(db, { provider: 'pg', schema }),
    advanced: { cookiePrefix: 'pennyweight', useSecureCookies: config.url.startsWith('https://'), disableOriginCheck: false, disableCSRFCheck: false, ipAddress: { ipAddressHeaders: [addressHeader] } },
    rateLimit: { enabled: false },
    logger: { level: 'error', log: (level, message) => log[level === 'error' ? 'warn' : 'debug']({ from: 'better-auth' }, message) },
    // Refusals (wrong password, foreign origin) are answers, not faults; the library would print them to the console.
    onAPIError: { onError: (error) => { if (error instanceof APIError) log.debug({ err: error }, 'sign-in service refused'); else log.error({ err: error }, 'sign-in service failed'); } },
    emailAndPassword: {
      enabled: true,
      disableSignUp: true,
      minPasswordLength: 12,
      maxPasswordLength: 128,
      revokeSessionsOnPasswordReset: true,
      sendResetPassword: async ({ user, token }) => {
        await mailer.send(passwordResetLetter(user.email, `${config.url}/reset?token=${encodeURIComponent(token)}`));
      },
      onPasswordReset: async ({ user }) => record('account.password-reset', user, null),
    },
    session: { expiresIn: 7 * day, updateAge: day },
    databaseHooks: {
      session: {
        create: {
          before: async (session) => {
            const [person] = await db.select({ active: schema.user.active }).from(schema.user).where(eq(schema.user.id, session.userId));
            if (!person?.active) throw new APIError('FORBIDDEN', { message: 'This account is closed. Ask an administrator.' });
          },
        },
        delete: {
          after: async (session, context) => {
            if (context?.path !== '/sign-out') return;
            const [person] = await db.select({ id: schema.user.id, name: schema.user.name, email: schema.user.email }).from(schema.user).where(eq(schema.user.id, session.userId));
            if (person) await record('account.sign-out', person, context.headers?.get('x-request-id') ?? null);
          },
        },
      },
    },
    hooks: {
      after: createAuthMiddleware(async (context) => {
        const requestId = context.headers?.get('x-request-id') ?? null;
        const { newSession, returned } = context.context;
        if (context.path === '/sign-in/email') {
          if (newSession) await record('account.sign-in', newSession.user, requestId);
          else if (returned instanceof APIError) await record('account.sign-in-refused', { id: null, email: String(context.body?.email ?? '') }, requestId);
        }
        if (context.path === '/request-password-reset') await record('account.password-reset-requested', { id: null, email: String(context.body?.email ?? '') }, requestId);
      }),
    },
  });
}

export type Auth = ReturnType<typeof createAuth>;
