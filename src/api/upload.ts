/** Sends a form with files. XMLHttpRequest, since fetch does not tell how much of a body has gone out. */
import { offline } from './api-error.ts';

export function sendForm(
  method: string, address: string, headers: Record<string, string>, data: FormData, onProgress?: (share: number) => void, signal?: AbortSignal,
): Promise<{ status: number; text: string }> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    const abort = () => request.abort();
    request.open(method, address);
    for (const [name, value] of Object.entries(headers)) request.setRequestHeader(name, value);
    if (onProgress) {
      request.upload.addEventListener('progress', ({ lengthComputable, loaded, total }) => {
        if (lengthComputable && total > 0) onProgress(loaded / total);
      });
    }
    request.addEventListener('load', () => resolve({ status: request.status, text: request.responseText }));
    request.addEventListener('error', () => reject(offline(new Error('The upload broke off.'))));
    request.addEventListener('abort', () => reject(signal?.reason ?? new DOMException('The upload was cancelled.', 'AbortError')));
    request.addEventListener('loadend', () => signal?.removeEventListener('abort', abort));
    if (signal?.aborted) return reject(signal.reason as Error);
    signal?.addEventListener('abort', abort);
    request.send(data);
  });
}
