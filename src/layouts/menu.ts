import { paths } from '~/domain/paths.ts';
import type { Viewer } from './viewer.ts';

export interface MenuItem {
  readonly label: string;
  readonly href: string;
}

export const mainMenu: readonly MenuItem[] = [
  { label: 'Logs near you', href: paths.logs },
  { label: 'Sawyers', href: paths.sawyers },
  { label: 'Log estimator', href: paths.estimator },
  { label: 'Safety', href: paths.safety },
];

/** What the account menu offers this person, most used first. */
export function accountMenu(viewer: Viewer): readonly MenuItem[] {
  return [
    ...(viewer.isLandowner ? [{ label: 'Your logs', href: paths.myListings }] : []),
    ...(viewer.isSawyer
      ? [
          { label: 'Your sawing', href: paths.sawyerHome },
          { label: 'Your bids', href: paths.bids },
          { label: 'Saved searches', href: paths.searches },
          { label: 'Shared trips', href: paths.trips },
          { label: 'Your calendar', href: paths.calendar },
          { label: 'Mill and rates', href: paths.mill },
        ]
      : []),
    { label: 'Bookings', href: paths.bookings },
    ...(viewer.isModerator ? [{ label: "Moderator's desk", href: paths.desk }] : []),
    { label: 'Account', href: paths.account },
  ];
}

export const footMenu: readonly MenuItem[] = [
  { label: 'How it works', href: paths.howItWorks },
  { label: 'Safety', href: paths.safety },
  { label: 'Privacy', href: paths.privacy },
  { label: 'Terms', href: paths.terms },
];
