/** How figures of a listing are said in a row. */
export const bidWords = (count: number): string => (count === 0 ? 'No bids yet' : count === 1 ? '1 bid' : `${count} bids`);
export const logWords = (count: number): string => (count === 1 ? '1 log' : `${count.toLocaleString('en-US')} logs`);
export const milesWords = (miles: number): string => (miles < 10 ? miles.toFixed(1) : String(Math.round(miles)));
