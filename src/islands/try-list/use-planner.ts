import { useEffect, useRef, useState } from 'react';
import type { ListingPlan } from '~/domain/sawing/listing-plan.ts';
import type { Asked, Said } from './messages.ts';

export type PlannerState =
  | { readonly at: 'idle' }
  /** `share` is null while plans are chosen among, which has no measure. */
  | { readonly at: 'working'; readonly share: number | null }
  | { readonly at: 'done'; readonly plan: ListingPlan; readonly asked: Asked }
  | { readonly at: 'cancelled' }
  | { readonly at: 'failed' };

export interface Planner {
  readonly state: PlannerState;
  readonly ask: (request: Asked) => void;
  readonly cancel: () => void;
}

/** Plans in a thread of the browser's own, so that the page stays quick; stopping the thread stops the work at once. */
export function usePlanner(): Planner {
  const [state, setState] = useState<PlannerState>({ at: 'idle' });
  const worker = useRef<Worker | null>(null);
  const stop = (): void => {
    worker.current?.terminate();
    worker.current = null;
  };
  useEffect(() => stop, []);

  const ask = (request: Asked): void => {
    stop();
    const thread = new Worker(new URL('./list-worker.ts', import.meta.url), { type: 'module' });
    worker.current = thread;
    setState({ at: 'working', share: 0 });
    thread.addEventListener('message', ({ data }: MessageEvent<Said>) => {
      if (worker.current !== thread) return;
      if (data.kind === 'planning') return setState({ at: 'working', share: data.share });
      if (data.kind === 'choosing') return setState({ at: 'working', share: null });
      stop();
      setState(data.kind === 'plan' ? { at: 'done', plan: data.plan, asked: request } : { at: 'failed' });
    });
    thread.addEventListener('error', () => {
      if (worker.current !== thread) return;
      stop();
      setState({ at: 'failed' });
    });
    thread.postMessage(request);
  };
  const cancel = (): void => {
    stop();
    setState({ at: 'cancelled' });
  };
  return { state, ask, cancel };
}
