/** better-auth: e-mail and password, server-side sessions in our database, reset by e-mail. Accounts are made by invitation only. */
import { betterAuth } from 'better-auth';
import { drizzleAdapter } from 'better-auth/adapters/drizzle';
import { APIError, createAuthMiddleware } from 'better-auth/api';
import { eq } from 'drizzle-orm';
import * as schema from '../db/schema/index.ts';
import { passwordResetLetter } from '../mail/letters.ts';
import { recordSignIn } from '../services/sign-in-audit.ts';
import type { App } from '../services/context.ts';

const day = 24 * 60 * 60;

export function createAuth(app: App) {
  const { config, db, mailer, log } = app;
  return betterAuth({
    baseURL: config.url,
    basePath: '/api/auth',
    secret: config.secret,
    trustedOrigins: [config.url],
    telemetry: { enabled: false },
    database: drizzleAdapter(db, { provider: 'pg', schema }),
    advanced: { cookiePrefix: 'pennyweight', useSecureCookies: config.url.startsWith('https://'), disableOriginCheck: false, disableCSRFCheck: false },
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
      onPasswordReset: async ({ user }) => recordSignIn(app, 'account.password-reset', user, null),
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
            if (person) await recordSignIn(app, 'account.sign-out', person, context.headers?.get('x-request-id') ?? null);
          },
        },
      },
    },
    hooks: {
      after: createAuthMiddleware(async (context) => {
        const requestId = context.headers?.get('x-request-id') ?? null;
        const { newSession, returned } = context.context;
        if (context.path === '/sign-in/email') {
          if (newSession) await recordSignIn(app, 'account.sign-in', newSession.user, requestId);
          else if (returned instanceof APIError) await recordSignIn(app, 'account.sign-in-refused', { id: null, email: String(context.body?.email ?? '') }, requestId);
        }
        if (context.path === '/request-password-reset') await recordSignIn(app, 'account.password-reset-requested', { id: null, email: String(context.body?.email ?? '') }, requestId);
      }),
    },
  });
}

export type Auth = ReturnType<typeof createAuth>;
