/** lookup3 (Bob Jenkins, 2006, public domain), the checksum of HDF5's own structures: hashlittle with initial value 0. */
const rotate = (value: number, bits: number) => (value << bits) | (value >>> (32 - bits));

export function lookup3(bytes: Uint8Array): number {
  let a = (0xdeadbeef + bytes.length) | 0;
  let b = a;
  let c = a;
  const word = (at: number, left: number) => {
    let value = 0;
    for (let i = 0; i < Math.min(4, left); i++) value |= bytes[at + i] << (8 * i);
    return value;
  };
  let at = 0;
  let left = bytes.length;
  for (; left > 12; left -= 12, at += 12) {
    a = (a + word(at, 4)) | 0;
    b = (b + word(at + 4, 4)) | 0;
    c = (c + word(at + 8, 4)) | 0;
    a = (a - c) ^ rotate(c, 4); c = (c + b) | 0;
    b = (b - a) ^ rotate(a, 6); a = (a + c) | 0;
    c = (c - b) ^ rotate(b, 8); b = (b + a) | 0;
    a = (a - c) ^ rotate(c, 16); c = (c + b) | 0;
    b = (b - a) ^ rotate(a, 19); a = (a + c) | 0;
    c = (c - b) ^ rotate(b, 4); b = (b + a) | 0;
  }
  if (left > 0) {
    a = (a + word(at, left)) | 0;
    b = (b + word(at + 4, left - 4)) | 0;
    c = (c + word(at + 8, left - 8)) | 0;
    c = (c ^ b) - rotate(b, 14);
    a = (a ^ c) - rotate(c, 11);
    b = (b ^ a) - rotate(a, 25);
    c = (c ^ b) - rotate(b, 16);
    a = (a ^ c) - rotate(c, 4);
    b = (b ^ a) - rotate(a, 14);
    c = (c ^ b) - rotate(b, 24);
  }
  return c >>> 0;
}
