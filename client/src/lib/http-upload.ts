import { ApiError, errorFrom } from './api-error.js';
import { OWN_HEADER, withSession } from './http.js';

export interface UploadOptions {
  readonly signal?: AbortSignal;
  /** fraction of the bytes that left this computer, 0 to 1 */
  readonly onProgress?: (sent: number) => void;
}

/** Sends a form and tells how far it got, which fetch cannot do. Rejects with an AbortError when cancelled, else with an ApiError. */
export const upload = <T>(path: string, form: FormData, options: UploadOptions = {}): Promise<T> =>
  withSession(() => send<T>(path, form, options));

function send<T>(path: string, form: FormData, { signal, onProgress }: UploadOptions): Promise<T> {
  return new Promise<T>((resolve, reject) => {
    const aborted = () => new DOMException('The upload was cancelled.', 'AbortError');
    if (signal?.aborted) return reject(aborted());
    const request = new XMLHttpRequest();
    request.open('POST', path);
    request.setRequestHeader('Accept', 'application/json, application/problem+json');
    for (const [name, value] of Object.entries(OWN_HEADER)) request.setRequestHeader(name, value);
    request.upload.onprogress = (event) => {
      if (event.lengthComputable) onProgress?.(event.loaded / event.total);
    };
    request.onload = () => {
      if (request.status < 200 || request.status > 299) {
        return reject(errorFrom(request.status, request.responseText, request.getResponseHeader('Retry-After')));
      }
      try {
        resolve(JSON.parse(request.responseText) as T);
      } catch {
        reject(new ApiError('strange_answer', request.status));
      }
    };
    request.onerror = () => reject(new ApiError('no_connection', 0));
    request.onabort = () => reject(aborted());
    signal?.addEventListener('abort', () => request.abort(), { once: true });
    request.send(form);
  });
}
