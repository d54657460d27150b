/** A refusal of the server as the client throws it: the RFC 9457 problem and its sentence. */
import { problem, type ErrorCode, type Problem } from '#contract/error.ts';

export class ApiProblem extends Error {
  override readonly name = 'ApiProblem';
  readonly problem: Problem;

  constructor(given: Problem) {
    super(given.detail);
    this.problem = given;
  }

  get code(): ErrorCode {
    return this.problem.code;
  }
}

/** The problem in an answer; an answer that is none (a proxy's page, no connection) becomes one. */
export async function problemOf(response: Response): Promise<ApiProblem> {
  const parsed = problem.safeParse(await response.json().catch(() => null));
  if (parsed.success) return new ApiProblem(parsed.data);
  return new ApiProblem({
    type: 'about:blank', title: 'Unexpected answer', status: response.status, code: 'unavailable',
    detail: `The server answered with status ${response.status} and no explanation. Try again; if it stays, tell the administrator.`,
  });
}

export function noConnection(): ApiProblem {
  return new ApiProblem({ type: 'about:blank', title: 'No connection', status: 0, code: 'unavailable', detail: 'The server cannot be reached. Check the network; what you typed is kept.' });
}
