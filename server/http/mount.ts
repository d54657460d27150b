/** Mounts one route of the contract: parse, find the caller, call the handler, answer by the contract's schema. */
import type { Request, Response, Router } from 'express';
import type { z } from 'zod';
import { PennyweightError } from '#contract/error.ts';
import type { Route } from '#contract/route.ts';
import type { App, Caller } from '../services/context.ts';

export interface Call<T extends Route> {
  app: App;
  /** null only on public routes */
  caller: Caller;
  params: z.output<T['params']>;
  query: z.output<T['query']>;
  body: z.output<T['body']>;
  req: Request;
  res: Response;
}

/** The character NUL as JSON writes it: PostgreSQL stores no text that holds one. */
const nul = /(^|[^\\])(\\\\)*\\u0000/;

function parse<S extends z.ZodType>(schema: S, value: unknown, where: string): z.output<S> {
  if (nul.test(JSON.stringify(value ?? {}))) throw new PennyweightError('invalid-input', `The ${where} is not valid: it holds the character NUL, which no text here may hold.`);
  const result = schema.safeParse(value ?? {});
  if (result.success) return result.data;
  const issues = result.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message }));
  const first = issues[0]!;
  throw new PennyweightError('invalid-input', `The ${where} is not valid: ${first.path ? `${first.path}: ` : ''}${first.message}.`, { issues });
}

/** `handler` returns what the contract's response says; a route with `media` writes the answer itself and returns undefined. */
export function mount<T extends Route>(router: Router, app: App, route: T, handler: (call: Call<T>) => Promise<z.input<T['response']> | void>): void {
  router[route.method](route.path, async (req, res) => {
    const caller = req.caller as Caller | undefined;
    if (route.access !== 'public') {
      if (!caller) throw req.callerProblem ?? new PennyweightError('not-signed-in', 'Sign in first, or send a personal token as "Authorization: Bearer …".');
      if (caller.principal.token && (route.scope === null || !caller.principal.token.scopes.includes(route.scope) && !(route.scope === 'read' && caller.principal.token.scopes.length > 0))) {
        throw new PennyweightError('token-scope', route.scope === null ? 'This cannot be done with a personal token: sign in.' : `This token lacks the scope "${route.scope}": make one that has it.`, { needed: route.scope });
      }
    }
    const answer = await handler({
      app, caller: caller as Caller, req, res,
      params: parse<T['params']>(route.params, req.params, 'address'),
      query: parse<T['query']>(route.query, req.query, 'query'),
      body: parse<T['body']>(route.body, req.body, 'form'),
    });
    if (route.media !== null || res.headersSent) return;
    if (route.status === 204) {
      res.status(204).end();
      return;
    }
    res.status(route.status).json(route.response.parse(answer));
  });
}
