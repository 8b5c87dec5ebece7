/** The little that is used of the platform: in browsers, workers and Node alike, but not in the language's own library. */
interface Decoder {
  decode(bytes?: Uint8Array, options?: { stream?: boolean }): string;
}
interface Encoder {
  encode(text: string): Uint8Array;
}
declare const TextDecoder: new (label: string, options?: { fatal?: boolean }) => Decoder;
declare const TextEncoder: new () => Encoder;

export const textDecoder = (label: string, fatal = false): Decoder => new TextDecoder(label, { fatal });

/** UTF-8 bytes of a text. */
export const utf8Bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

/** Bytes taken as Latin-1, one character each; for headers and short pieces. */
export function latin1(bytes: Uint8Array, from: number, to: number): string {
  let text = '';
  for (let start = from; start < to; start += 4096) text += String.fromCharCode(...bytes.subarray(start, Math.min(to, start + 4096)));
  return text;
}
