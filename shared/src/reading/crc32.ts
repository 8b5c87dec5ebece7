/** Table of the reflected polynomial 0xEDB88320, RFC 1952 section 8. */
const TABLE = new Int32Array(256).map((_, n) => {
  let c = n;
  for (let bit = 0; bit < 8; bit++) c = c & 1 ? (c >>> 1) ^ 0xedb88320 : c >>> 1;
  return c;
});

/** CRC-32 of gzip, carried on from `crc` (0 at the start); a signed 32-bit integer. */
export function crc32(bytes: Uint8Array, crc: number): number {
  let c = ~crc;
  for (let i = 0; i < bytes.length; i++) c = TABLE[(c ^ bytes[i]!) & 0xff]! ^ (c >>> 8);
  return ~c;
}
