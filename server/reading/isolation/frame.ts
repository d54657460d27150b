/**
 * A block of snapshots on its way: a header of 40 bytes (five little-endian doubles: mark, plan, first position, count,
 * values a snapshot), then count x nodes doubles.
 */
export interface FrameHeader {
  plan: number;
  from: number;
  count: number;
  nodes: number;
}

export const headerBytes = 40;
/** Tells a frame from anything else that might come through the pipe. */
const mark = 20261201;
/** No block is larger: one snapshot at its limit. */
const mostBytes = 2 ** 30;

export function writeHeader({ plan, from, count, nodes }: FrameHeader): Uint8Array {
  return new Uint8Array(Float64Array.of(mark, plan, from, count, nodes).buffer);
}

/** null for bytes that are no header. */
export function readHeader(bytes: Uint8Array): FrameHeader | null {
  const [found, plan, from, count, nodes] = new Float64Array(bytes.slice(0, headerBytes).buffer);
  const sound = [plan, from, count, nodes].every((value) => Number.isSafeInteger(value) && value >= 0);
  return found === mark && sound && count * nodes * 8 <= mostBytes ? { plan, from, count, nodes } : null;
}
