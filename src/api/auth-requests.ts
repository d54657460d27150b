/** The few calls to better-auth, which has its own addresses below /api/auth. */
import { ApiProblem, noConnection } from './api-problem.ts';

async function post(path: string, body: unknown): Promise<void> {
  let response: Response;
  try {
    response = await fetch(`/api/auth/${path}`, { method: 'POST', credentials: 'same-origin', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
  } catch {
    throw noConnection();
  }
  if (response.ok) return;
  const given = (await response.json().catch(() => ({}))) as { message?: string; detail?: string };
  const detail = given.detail ?? (response.status === 401 ? 'E-mail address or password is wrong.' : (given.message ?? 'The server refused this.'));
  throw new ApiProblem({ type: 'about:blank', title: 'Refused', status: response.status, code: response.status === 429 ? 'too-many-requests' : 'not-signed-in', detail });
}

export const signIn = (email: string, password: string) => post('sign-in/email', { email, password });
export const signOut = () => post('sign-out', {});
export const requestReset = (email: string) => post('request-password-reset', { email, redirectTo: '/reset' });
export const resetPassword = (token: string, newPassword: string) => post('reset-password', { token, newPassword });
