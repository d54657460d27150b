/**
 * Sends the files of deliveries by tus, one after the other, outside React: leaving the page does not stop it. After a reload the
 * server still knows what was received; the person chooses the same file again and sending goes on at that byte.
 */
import { DetailedError, Upload } from 'tus-js-client';
import { tusPath, type Delivery } from '#contract/archive.ts';
import { problem } from '#contract/error.ts';
import { TransferRate } from './transfer-rate.ts';

export type SendState = 'waiting' | 'sending' | 'paused' | 'signed-out' | 'failed' | 'verifying' | 'done';

export interface SendingFile {
  id: string;
  name: string;
  bytes: number;
  sent: number;
  state: SendState;
  problem: string | null;
}

export interface Sending {
  delivery: string;
  campaign: string;
  run: string;
  files: SendingFile[];
  rate: number | null;
  secondsLeft: number | null;
}

interface Entry {
  delivery: Delivery;
  rate: TransferRate;
  files: { view: SendingFile; file: File; created: boolean; upload: Upload | null }[];
}

/** What the server said, in its own sentence. */
function sentenceOf(error: Error): { sentence: string; signedOut: boolean } {
  if (error instanceof DetailedError && error.originalResponse) {
    const signedOut = error.originalResponse.getStatus() === 401;
    if (signedOut) return { signedOut, sentence: 'Your session has ended. Sign in again; what was received is kept, and sending goes on from there.' };
    try {
      const given = problem.safeParse(JSON.parse(error.originalResponse.getBody()));
      if (given.success) return { signedOut, sentence: given.data.detail };
    } catch {
      // not JSON: an answer of something between us and the server
    }
    return { signedOut, sentence: `The server refused the file with status ${error.originalResponse.getStatus()}.` };
  }
  return { signedOut: false, sentence: 'The connection was lost and did not come back. Press resume: what was received is kept.' };
}

class SendQueue {
  private entries = new Map<string, Entry>();
  private listeners = new Set<() => void>();
  private snapshot: Sending[] = [];
  private onFinished: (campaign: string) => void = () => undefined;

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };
  getSnapshot = (): Sending[] => this.snapshot;
  whenFinished(listener: (campaign: string) => void): void {
    this.onFinished = listener;
  }

  /** Begins, or goes on with, the files of a delivery. `files` holds those that the person chose, by name. */
  add(delivery: Delivery, files: Map<string, File>): void {
    const entry: Entry = this.entries.get(delivery.id) ?? { delivery, rate: new TransferRate(), files: [] };
    for (const announced of delivery.files) {
      const file = files.get(announced.name);
      if (!file || announced.state === 'verified' || entry.files.some((known) => known.view.id === announced.id)) continue;
      entry.files.push({
        file, created: announced.state === 'receiving', upload: null,
        view: { id: announced.id, name: announced.name, bytes: announced.bytes, sent: announced.received, state: 'waiting', problem: null },
      });
    }
    this.entries.set(delivery.id, entry);
    this.publish();
    this.next();
  }

  pause(delivery: string): void {
    for (const item of this.entries.get(delivery)?.files ?? []) {
      if (item.view.state !== 'sending' && item.view.state !== 'waiting') continue;
      void item.upload?.abort();
      item.view = { ...item.view, state: 'paused' };
    }
    this.entries.get(delivery)?.rate.reset();
    this.publish();
    this.next();
  }

  resume(delivery: string): void {
    for (const item of this.entries.get(delivery)?.files ?? []) {
      if (item.view.state === 'paused' || item.view.state === 'failed' || item.view.state === 'signed-out') item.view = { ...item.view, state: 'waiting', problem: null };
    }
    this.publish();
    this.next();
  }

  /** Forgets a delivery that was given up or is complete. */
  remove(delivery: string): void {
    for (const item of this.entries.get(delivery)?.files ?? []) void item.upload?.abort();
    this.entries.delete(delivery);
    this.publish();
  }

  busy(): boolean {
    return this.snapshot.some((sending) => sending.files.some((file) => file.state === 'sending' || file.state === 'waiting'));
  }

  private next(): void {
    for (const entry of this.entries.values()) if (entry.files.some((item) => item.view.state === 'sending')) return;
    for (const entry of this.entries.values()) {
      const item = entry.files.find((candidate) => candidate.view.state === 'waiting');
      if (item) return this.start(entry, item);
    }
  }

  private start(entry: Entry, item: Entry['files'][number]): void {
    const set = (change: Partial<SendingFile>) => {
      item.view = { ...item.view, ...change };
      this.publish();
    };
    item.upload = new Upload(item.file, {
      endpoint: tusPath,
      uploadUrl: item.created ? `${tusPath}/${item.view.id}` : undefined,
      metadata: { delivery: entry.delivery.id, file: item.view.id, filename: item.view.name },
      retryDelays: [0, 1000, 2000, 4000, 8000, 15000, 30000],
      storeFingerprintForResuming: false,
      onUploadUrlAvailable: () => {
        item.created = true;
      },
      onShouldRetry: (error) => {
        const status = error.originalResponse?.getStatus() ?? 0;
        return status === 0 || status === 423 || status >= 500;
      },
      onProgress: (sent) => {
        entry.rate.add(performance.now(), this.sentBefore(entry, item) + sent);
        set({ sent, state: sent === item.view.bytes ? 'verifying' : item.view.state === 'paused' ? 'paused' : 'sending' });
      },
      onError: (error) => {
        const { sentence, signedOut } = sentenceOf(error);
        entry.rate.reset();
        set({ state: signedOut ? 'signed-out' : 'failed', problem: sentence });
        this.next();
      },
      onSuccess: () => {
        set({ sent: item.view.bytes, state: 'done' });
        if (entry.files.every((each) => each.view.state === 'done')) this.onFinished(entry.delivery.campaign);
        this.next();
      },
    });
    set({ state: 'sending' });
    item.upload.start();
  }

  private sentBefore(entry: Entry, item: Entry['files'][number]): number {
    return entry.files.reduce((sum, each) => (each === item ? sum : sum + each.view.sent), 0);
  }

  private publish(): void {
    this.snapshot = [...this.entries.values()].map((entry) => ({
      delivery: entry.delivery.id, campaign: entry.delivery.campaign, run: entry.delivery.run, files: entry.files.map((item) => item.view),
      rate: entry.rate.rate(), secondsLeft: entry.rate.secondsLeft(entry.files.reduce((sum, item) => sum + item.view.bytes, 0)),
    }));
    for (const listener of this.listeners) listener();
  }
}

export const sendQueue = new SendQueue();
