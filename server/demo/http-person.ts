/** One person of the demo at the HTTP API: signs in, calls routes of the contract, hands in files by tus. */
import { open } from 'node:fs/promises';
import { Readable } from 'node:stream';
import type { Job } from '#contract/operation.ts';
import { tusPath, type Delivery } from '#contract/archive.ts';
import { PennyweightError, problem } from '#contract/error.ts';
import { pathTo, type BodyOf, type ParamsOf, type QueryOf, type ResponseOf, type Route } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';

async function refusal(response: Response, what: string): Promise<PennyweightError> {
  const given = problem.safeParse(await response.json().catch(() => null));
  const detail = given.success ? given.data.detail : `status ${response.status}`;
  return new PennyweightError(given.success ? given.data.code : 'internal', `The demo could not be seeded: ${what}: ${detail}`);
}

export class HttpPerson {
  private readonly base: string;
  private cookie = '';

  constructor(base: string) {
    this.base = base;
  }

  private headers(more: Record<string, string> = {}): Record<string, string> {
    return { origin: this.base, cookie: this.cookie, ...more };
  }

  async signIn(email: string, password: string): Promise<void> {
    const response = await fetch(`${this.base}/api/auth/sign-in/email`, { method: 'POST', headers: this.headers({ 'content-type': 'application/json' }), body: JSON.stringify({ email, password }) });
    if (!response.ok) throw await refusal(response, `sign-in of ${email}`);
    this.cookie = response.headers.getSetCookie().map((line) => line.split(';')[0]).join('; ');
  }

  async call<T extends Route>(route: T, order: { params?: ParamsOf<T>; query?: QueryOf<T>; body?: BodyOf<T> } = {}): Promise<ResponseOf<T>> {
    const url = pathTo(route, order.params, order.query);
    const response = await fetch(this.base + url, {
      method: route.method.toUpperCase(),
      headers: this.headers(order.body === undefined ? {} : { 'content-type': 'application/json' }),
      body: order.body === undefined ? undefined : JSON.stringify(order.body),
    });
    if (!response.ok) throw await refusal(response, `${route.method.toUpperCase()} ${url}`);
    if (route.media !== null) {
      await response.arrayBuffer();
      return undefined as ResponseOf<T>;
    }
    return (response.status === 204 ? null : await response.json()) as ResponseOf<T>;
  }

  /** Sends every file of a delivery (tus 1.0.0: creation, then PATCH). */
  async sendFiles(delivery: Delivery, pathOf: (name: string) => string): Promise<void> {
    for (const file of delivery.files) {
      const metadata = Object.entries({ delivery: delivery.id, file: file.id, filename: file.name }).map(([key, value]) => `${key} ${Buffer.from(value).toString('base64')}`).join(',');
      const created = await fetch(this.base + tusPath, { method: 'POST', headers: this.headers({ 'tus-resumable': '1.0.0', 'upload-length': String(file.bytes), 'upload-metadata': metadata }) });
      if (created.status !== 201) throw await refusal(created, `announcing ${file.name}`);
      const handle = await open(pathOf(file.name));
      try {
        const sent = await fetch(`${this.base}${tusPath}/${file.id}`, {
          method: 'PATCH', duplex: 'half', body: Readable.toWeb(handle.createReadStream({ autoClose: false })),
          headers: this.headers({ 'tus-resumable': '1.0.0', 'upload-offset': '0', 'content-type': 'application/offset+octet-stream' }),
        } as RequestInit);
        if (sent.status !== 204) throw await refusal(sent, `sending ${file.name}`);
      } finally {
        await handle.close();
      }
    }
  }

  /** Waits for a job; a failed one is an error with its problem. */
  async finished(jobId: string, seconds = 300): Promise<Job> {
    for (const end = Date.now() + seconds * 1000; Date.now() < end; ) {
      const job = await this.call(routes.getJob, { params: { job: jobId } });
      if (job.state === 'done') return job;
      if (job.state === 'failed' || job.state === 'cancelled') throw new PennyweightError('internal', `The demo could not be seeded: job ${job.label}: ${job.problem?.detail ?? job.state}`);
      await new Promise((resolve) => setTimeout(resolve, 200));
    }
    throw new PennyweightError('internal', `The demo could not be seeded: job ${jobId} did not finish in ${seconds} s; is the worker running?`);
  }
}
