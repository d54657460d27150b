/** A real SMTP server on loopback that keeps the last letters in memory: the inbox that demo and tests open. */
import { randomUUID } from 'node:crypto';
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';
import type { z } from 'zod';
import type { message } from '#contract/account.ts';

export type Message = z.infer<typeof message>;

const kept = 200;

export interface DemoInbox {
  url: string;
  messages(): Message[];
  close(): Promise<void>;
}

/** Undoes the soft line breaks and =XX of quoted-printable (RFC 2045, section 6.7). */
function decodeQuotedPrintable(text: string): string {
  const bytes = text.replace(/=\r?\n/g, '').replace(/=([0-9A-F]{2})/gi, (_, hex: string) => String.fromCharCode(parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1').toString('utf8');
}

/** Enough of RFC 5322 for the plain letters of this program: one text part. */
function readLetter(raw: string): Message {
  const [head = '', ...rest] = raw.split(/\r?\n\r?\n/);
  const header = (name: string) => new RegExp(`^${name}:\\s*(.*(?:\\r?\\n[ \\t].*)*)`, 'im').exec(head)?.[1]?.replace(/\r?\n[ \t]+/g, ' ').trim() ?? '';
  const encoding = header('Content-Transfer-Encoding').toLowerCase();
  const body = rest.join('\n\n');
  const text = encoding === 'base64' ? Buffer.from(body, 'base64').toString('utf8') : encoding === 'quoted-printable' ? decodeQuotedPrintable(body) : body;
  return { id: randomUUID(), at: new Date().toISOString(), to: header('To'), from: header('From'), subject: header('Subject'), text: text.trim(), links: text.match(/https?:\/\/\S+/g) ?? [] };
}

export async function openDemoInbox(): Promise<DemoInbox> {
  const messages: Message[] = [];
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, _session, done) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        messages.unshift(readLetter(Buffer.concat(chunks).toString('utf8')));
        messages.length = Math.min(messages.length, kept);
        done();
      });
    },
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(0, '127.0.0.1', () => resolve());
  });
  const { port } = server.server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${port}`,
    messages: () => [...messages],
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
