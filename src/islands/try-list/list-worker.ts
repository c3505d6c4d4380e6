import loadHighs from 'highs';
import wasm from 'highs/runtime?url';
import { listingPlan } from '~/domain/sawing/listing-plan.ts';
import { highsOptions, solverOf, type TextSolution } from '~/domain/sawing/solver.ts';
import type { Asked, Said } from './messages.ts';

/** How long the logs are planned, and how long one choosing may take: as on the server. */
const PLANNING_MS = 2500;
const SOLVER_SECONDS = 0.4;
const TELL_EVERY_MS = 80;

const say = (said: Said): void => self.postMessage(said);

async function plan(request: Asked): Promise<void> {
  const highs = await loadHighs({ locateFile: () => wasm });
  const from = performance.now();
  let told = -Infinity;
  const toPlan = (): boolean => {
    const spent = performance.now() - from;
    if (spent - told >= TELL_EVERY_MS) {
      told = spent;
      say(spent < PLANNING_MS ? { kind: 'planning', share: spent / PLANNING_MS } : { kind: 'choosing' });
    }
    return spent < PLANNING_MS;
  };
  const solve = solverOf((text, seconds) => {
    say({ kind: 'choosing' });
    return highs.solve(text, highsOptions(seconds)) as TextSolution;
  });
  say({ kind: 'plan', plan: listingPlan(request, solve, { toPlan, solverSeconds: SOLVER_SECONDS }) });
}

self.addEventListener('message', ({ data }: MessageEvent<Asked>) => {
  plan(data).catch((error: unknown) => say({ kind: 'failed', message: error instanceof Error ? error.message : String(error) }));
});
