import type { ListingPlan, ListingPlanRequest } from '~/domain/sawing/listing-plan.ts';

/** What the page asks the worker. */
export type Asked = ListingPlanRequest;

/** What the worker says: how far the planning is (0 to 1, then the choosing, which has no measure), the plan, or that it failed. */
export type Said = { readonly kind: 'planning'; readonly share: number } | { readonly kind: 'choosing' } | { readonly kind: 'plan'; readonly plan: ListingPlan } | { readonly kind: 'failed'; readonly message: string };
