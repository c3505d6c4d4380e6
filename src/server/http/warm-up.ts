import { request } from 'node:http';

const LONGEST_MS = 10_000;
const question = JSON.stringify({ logs: [{ id: 'log', smallEndIn: 8, lengthFt: 8 }], mill: { kerfIn: 0.125 }, pieces: [{ id: 'board', thicknessIn: 1, widthIn: 4, lengthFt: 8, count: 2 }] });

/**
 * Asks this server for one small cut list, so that the planning thread and its solver are loaded before anybody waits for them.
 * Never throws: without an answer the first cut list is only slower.
 */
export const warmUp = ({ PORT, ORIGIN }: { readonly PORT: number; readonly ORIGIN: string }): Promise<void> =>
  new Promise((done) => {
    const asked = request({ host: '127.0.0.1', port: PORT, path: '/api/cut-list', method: 'POST', timeout: LONGEST_MS, headers: { host: new URL(ORIGIN).host, 'content-type': 'application/json', 'content-length': Buffer.byteLength(question) } }, (answer) => {
      answer.resume().once('close', done);
    });
    asked.once('error', () => done()).once('timeout', () => void asked.destroy()).once('close', done);
    asked.end(question);
  });
