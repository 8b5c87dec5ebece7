import type { ReadReply, ReadRequest } from './protocol.js';
import { sha256Of } from './hash.js';
import { readFile } from './read-file.js';

/** The bytes of the file read last: a correction reads the same file again at once. */
let kept: { file: File; bytes: Uint8Array; sha256: string | null } | null = null;

async function contentOf(file: File) {
  // a File arrives as a copy with each message, so its name, size and date tell whether it is the same
  const same = kept && kept.file.name === file.name && kept.file.size === file.size && kept.file.lastModified === file.lastModified;
  if (kept && same) return kept;
  const bytes = new Uint8Array(await file.arrayBuffer());
  return (kept = { file, bytes, sha256: await sha256Of(bytes) });
}

const post = (reply: ReadReply) => postMessage(reply);

onmessage = async ({ data: { id, file, corrections } }: MessageEvent<ReadRequest>) => {
  try {
    const { bytes, sha256 } = await contentOf(file);
    post({ id, read: { ...readFile(bytes, file.name, corrections), sha256 } });
  } catch {
    const sentence = 'The browser could not open the file. It may have been moved, changed or locked since it was chosen; choose it again.';
    post({ id, read: { ok: false, problem: { code: 'not_opened', sentence }, lines: [] } });
  }
};
