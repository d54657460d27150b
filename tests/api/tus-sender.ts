/** A sender of files that speaks tus 1.0.0 request by request, so that a test decides what is sent, and when it breaks off. */
import { request, type ClientRequest, type IncomingMessage } from 'node:http';
import { tusPath, type Delivery } from '#contract/archive.ts';
import type { Problem } from '#contract/error.ts';

export interface Answer {
  status: number;
  headers: Headers;
  problem: Problem | null;
}

const version = { 'tus-resumable': '1.0.0' };

async function answer(response: Response): Promise<Answer> {
  const text = await response.text();
  const isProblem = response.headers.get('content-type')?.startsWith('application/problem+json');
  return { status: response.status, headers: response.headers, problem: isProblem && text ? (JSON.parse(text) as Problem) : null };
}

const base64 = (text: string) => Buffer.from(text).toString('base64');
export const metadataOf = (fields: Record<string, string>) => Object.entries(fields).map(([key, value]) => `${key} ${base64(value)}`).join(',');

export class TusSender {
  readonly url: string;
  readonly credentials: Record<string, string>;

  /** `credentials`: the headers that say who sends. */
  constructor(url: string, credentials: Record<string, string>) {
    this.url = url;
    this.credentials = credentials;
  }

  async call(method: string, path: string, headers: Record<string, string>, body?: Uint8Array): Promise<Answer> {
    return answer(await fetch(this.url + path, { method, headers: { ...version, ...this.credentials, ...headers }, body: body as BodyInit | undefined }));
  }

  /** Begins the upload of an announced file; `headers` overrule what a well-behaved sender says. */
  begin(delivery: Delivery, position = 0, headers: Record<string, string> = {}): Promise<Answer> {
    const file = delivery.files[position];
    return this.call('POST', tusPath, { 'upload-length': String(file.bytes), 'upload-metadata': metadataOf({ delivery: delivery.id, file: file.id, filename: file.name }), ...headers });
  }

  look(id: string): Promise<Answer> {
    return this.call('HEAD', `${tusPath}/${id}`, {});
  }

  async offset(id: string): Promise<number> {
    return Number((await this.look(id)).headers.get('upload-offset'));
  }

  patch(id: string, offset: number, bytes: Uint8Array): Promise<Answer> {
    return this.call('PATCH', `${tusPath}/${id}`, { 'upload-offset': String(offset), 'content-type': 'application/offset+octet-stream' }, bytes);
  }

  remove(id: string): Promise<Answer> {
    return this.call('DELETE', `${tusPath}/${id}`, {});
  }

  /** A PATCH whose body the test writes itself; without `length` it goes in chunks of unknown number. */
  openPatch(id: string, offset: number, length?: number): { request: ClientRequest; answered: Promise<Answer> } {
    const outgoing = request(`${this.url}${tusPath}/${id}`, {
      method: 'PATCH', agent: false,
      headers: { ...version, ...this.credentials, 'upload-offset': offset, 'content-type': 'application/offset+octet-stream', ...(length === undefined ? {} : { 'content-length': length }) },
    });
    const answered = new Promise<Answer>((resolve, reject) => {
      outgoing.on('error', reject);
      outgoing.on('response', (incoming: IncomingMessage) => {
        const parts: Buffer[] = [];
        incoming.on('data', (part: Buffer) => parts.push(part));
        incoming.on('end', () => {
          const text = Buffer.concat(parts).toString();
          const headers = new Headers(incoming.headers as Record<string, string>);
          const isProblem = headers.get('content-type')?.startsWith('application/problem+json');
          resolve({ status: incoming.statusCode ?? 0, headers, problem: isProblem && text ? (JSON.parse(text) as Problem) : null });
        });
      });
    });
    answered.catch(() => undefined);
    return { request: outgoing, answered };
  }

  /** The whole file in requests of `chunk` bytes. */
  async send(delivery: Delivery, bytes: Uint8Array, { position = 0, chunk = bytes.length }: { position?: number; chunk?: number } = {}): Promise<Answer> {
    const begun = await this.begin(delivery, position);
    if (begun.status !== 201) return begun;
    const { id } = delivery.files[position];
    let last = begun;
    for (let at = 0; at < bytes.length; at += chunk) {
      last = await this.patch(id, at, bytes.subarray(at, at + chunk));
      if (last.status !== 204) return last;
    }
    return last;
  }
}

/** A session of its own for an account, as a browser would hold it. */
export async function signedInSender(url: string, { email, password }: { email: string; password: string }): Promise<TusSender> {
  const response = await fetch(`${url}/api/auth/sign-in/email`, { method: 'POST', headers: { 'content-type': 'application/json', origin: url }, body: JSON.stringify({ email, password }) });
  await response.body?.cancel();
  const cookie = response.headers.getSetCookie().map((each) => each.split(';')[0]).join('; ');
  return new TusSender(url, { cookie, origin: url });
}
