/** Storage refused the file, or the connection broke; the message is for a person. */
export class SendFailure extends Error {}

/**
 * Sends a file straight to storage with the form that our server signed. `fetch` does not tell how much has gone, so the older
 * request is used.
 * @param onSent told the share sent, 0 to 1
 * @throws SendFailure; AbortError when the signal is given
 */
export function sendFile(form: { readonly url: string; readonly fields: Readonly<Record<string, string>> }, file: File, onSent: (share: number) => void, signal: AbortSignal): Promise<void> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    const body = new FormData();
    for (const [name, value] of Object.entries(form.fields)) body.append(name, value);
    // Storage ignores every field after the file.
    body.append('file', file, file.name);
    const lost = (): void => reject(new SendFailure('The connection was lost on the way. Try again.'));
    request.upload.addEventListener('progress', (event) => onSent(event.lengthComputable && event.total > 0 ? event.loaded / event.total : 0));
    request.addEventListener('load', () => {
      if (request.status >= 200 && request.status < 300) resolve();
      else if (request.responseText.includes('EntityTooLarge')) reject(new SendFailure('This picture is larger than 25 MB. Save it smaller or choose another one.'));
      else reject(new SendFailure('Storage did not take this file. Try again.'));
    });
    request.addEventListener('error', lost);
    request.addEventListener('timeout', lost);
    request.addEventListener('abort', () => reject(new DOMException('Cancelled', 'AbortError')));
    signal.addEventListener('abort', () => request.abort(), { once: true });
    request.open('POST', form.url);
    request.send(body);
  });
}
