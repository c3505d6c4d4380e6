export * from './account.ts';
export * from './booking.ts';
export * from './event.ts';
export * from './finding.ts';
export * from './listing.ts';
export * from './money.ts';
export * from './sawyer.ts';
export * from './tally.ts';
