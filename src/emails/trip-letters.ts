import { formatCents } from '~/domain/money.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface To {
  readonly name: string;
  readonly email: string;
}
interface Figures {
  readonly aloneTravelCents: number;
  readonly travelCents: number;
  readonly aloneCostCents: number;
  readonly costCents: number;
}

const facts = (figures: Figures): readonly (readonly [string, string])[] => [
  ['Travel alone', formatCents(figures.aloneTravelCents)],
  ['Your part of the travel', formatCents(figures.travelCents)],
  ['Estimate alone', formatCents(figures.aloneCostCents)],
  ['Estimate on the trip', formatCents(figures.costCents)],
];

/** To a landowner: the sawyer would come on one outing with others. */
export const tripOffered = (to: To, sawyer: string, title: string, figures: Figures, others: number, day: string, link: string): MailMessage =>
  letter(to.email, `A shared trip for ${title}`, to.name, [
    `${sawyer} would come on ${day}, on one outing with ${others === 1 ? 'one other place' : `${others} other places`} near you, and share the travel. The others do not learn where you are.`,
    { facts: facts(figures) },
    'Nothing changes until everybody has agreed. If somebody leaves, you see the new figure first.',
    { button: 'See the trip and answer', href: link },
  ]);

/** To a landowner who is still on the trip: somebody has left, the figure is new. */
export const tripChanged = (to: To, title: string, figures: Figures, day: string, link: string): MailMessage =>
  letter(to.email, `New figures for the shared trip: ${title}`, to.name, [`Somebody has left the trip on ${day}, so your part is another. Nothing binds you until you agree to it.`, { facts: facts(figures) }, { button: 'See the trip and answer', href: link }]);

/** To the sawyer: somebody has left, and the trip goes on with fewer. */
export const tripSmaller = (to: To, trip: { readonly places: number; readonly miles: number; readonly wholeCents: number; readonly aloneCents: number }, day: string, link: string): MailMessage =>
  letter(to.email, `One place fewer on your trip on ${day}`, to.name, [
    `A landowner is no longer on the trip. ${trip.places} places are left, ${trip.miles} miles base to base. Whoever pays another part than before is asked again; you hear when all have agreed.`,
    { facts: [['Travel of the trip', formatCents(trip.wholeCents)], ['One by one', formatCents(trip.aloneCents)]] },
    { button: 'See the trip', href: link },
  ]);

/** To a landowner, or the sawyer: the trip does not come about. */
export const tripEnded = (to: To, why: string, link: string): MailMessage =>
  letter(to.email, 'The shared trip does not come about', to.name, [`${why} Bids and bookings stand as they were, each on its own.`, { button: 'See the trip', href: link }]);

/** To the sawyer: all have agreed. */
export const tripAgreed = (to: To, places: number, day: string, link: string): MailMessage =>
  letter(to.email, `Agreed: your trip on ${day}`, to.name, [`All ${places} landowners have agreed. Each now pays the hold; the exact places are shown as they do.`, { button: 'See the day', href: link }]);
