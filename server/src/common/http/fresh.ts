import type { Request, Response } from 'express';

/**
 * For bytes that stay the same under one `tag`: sets it as their ETag, so a browser that has them asks whether it still may (no-cache).
 * @returns whether the caller has exactly these; then the answer is 304 and needs no body
 */
export function hasFresh(request: Request, response: Response, tag: string): boolean {
  response.setHeader('ETag', `"${tag}"`);
  response.setHeader('Cache-Control', 'private, no-cache');
  delete request.headers['cache-control']; // asking caches for a fresh answer; ours says whether the bytes are still these
  if (!request.fresh) return false;
  response.status(304);
  return true;
}
