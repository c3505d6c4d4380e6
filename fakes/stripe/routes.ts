import type { Route } from './route.ts';
import { ACCOUNT_ROUTES } from './routes/accounts.ts';
import { CHECKOUT_ROUTES } from './routes/checkout.ts';
import { MONEY_ROUTES } from './routes/money.ts';
import { PAYMENT_ROUTES } from './routes/payments.ts';
import { WEBHOOK_ROUTES } from './routes/webhooks.ts';

const ROUTES: readonly Route[] = [...ACCOUNT_ROUTES, ...CHECKOUT_ROUTES, ...MONEY_ROUTES, ...PAYMENT_ROUTES, ...WEBHOOK_ROUTES];

/** Finds the endpoint for a request: its route and the ids in its path. */
export function routeFor(method: string, path: string): { route: Route; ids: string[] } | null {
  const parts = path.split('/').filter((part) => part !== '');
  for (const route of ROUTES) {
    const wanted = route.path.split('/').filter((part) => part !== '');
    if (route.method !== method || wanted.length !== parts.length) continue;
    const ids: string[] = [];
    const fits = wanted.every((part, index) => {
      const given = parts[index] ?? '';
      if (part !== '*') return part === given;
      ids.push(decodeURIComponent(given));
      return true;
    });
    if (fits) return { route, ids };
  }
  return null;
}
