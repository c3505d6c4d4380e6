import { paths } from '~/domain/paths.ts';

/** What a sawyer fills in before the first bid. */
export type SetUpPart = 'profile' | 'mill' | 'rates';

const pages: Readonly<Record<SetUpPart, string>> = { profile: paths.profile, mill: paths.mill, rates: paths.rates };

/**
 * Where to go after one part was saved: the next part that is still missing, the sawyer's home once nothing is, or the same page when
 * the part had been there before.
 * @param missingBefore what was missing before this part was saved
 * @param next a page of ours that led here, gone back to once nothing is missing
 */
export function afterSaving(part: SetUpPart, missingBefore: readonly SetUpPart[], next: string | null): string {
  const missing = missingBefore.find((one) => one !== part);
  if (next !== null) return missing === undefined ? next : `${pages[missing]}?done=${part}&next=${encodeURIComponent(next)}`;
  if (!missingBefore.includes(part)) return `${pages[part]}?done=saved`;
  return missing === undefined ? `${paths.sawyerHome}?done=set-up` : `${pages[missing]}?done=${part}`;
}

/** What the notice on top of a set-up page says after a save, by the `done` of its address; undefined for a strange one. */
export const doneWords = (done: string | null): { readonly title: string; readonly text: string } | undefined =>
  done === null ? undefined : (
    {
      saved: { title: 'Saved.', text: 'New bids use it from now on. Bids you have made keep what they were made with.' },
      profile: { title: 'Profile saved.', text: 'This comes next.' },
      mill: { title: 'Mill saved.', text: 'This comes next.' },
      rates: { title: 'Rates saved.', text: 'This comes next.' },
    } as Readonly<Record<string, { readonly title: string; readonly text: string }>>
  )[done];
