import { clientAddress } from './client-address.ts';
import { countMore, countTry } from './limits.ts';

/**
 * Works out something that costs seconds, for anyone: who asks has so many seconds of it in ten minutes.
 * @param work is given who asks
 * @throws Refusal `tooMany` when they are used up
 */
export async function calculate<T>(request: Request, work: (asker: string) => Promise<T>): Promise<T> {
  const asker = clientAddress(request);
  await countTry('planning', asker);
  const began = performance.now();
  try {
    return await work(asker);
  } finally {
    await countMore('planning', asker, Math.floor((performance.now() - began) / 1000));
  }
}
