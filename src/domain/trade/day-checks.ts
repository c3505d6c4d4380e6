/**
 * What is gone through aloud before the first cut: usual practice, no single source; the mill's own manual comes first.
 * @param place the exact place, for the emergency address
 */
export const checksBeforeSawing = (place: { readonly lat: number; readonly lng: number } | null): readonly string[] => [
  'People and animals are clear of the mill, the fall of the boards and the log deck',
  'No overhead lines within reach of the mill, the loader or a raised log',
  'The ground is firm and level; the mill is chocked and levelled',
  'Eyes, ears, hands and feet are protected; no loose clothing',
  'The blade guard is closed and the blade is sound',
  'Fire extinguisher and first aid are at hand',
  `The emergency address is known to everyone here${place ? `: ${place.lat.toFixed(5)}, ${place.lng.toFixed(5)}` : ''}`,
];
