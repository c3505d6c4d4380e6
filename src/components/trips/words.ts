/** How a stop's state is said to the sawyer. */
export function stopWords(status: string, outBecause: string | null): string {
  if (status === 'out') return `Not on the trip${outBecause ? `: ${outBecause}` : ''}`;
  return { asked: 'Asked', agreed: 'Agreed', bound: 'Agreed by all' }[status] ?? status;
}
