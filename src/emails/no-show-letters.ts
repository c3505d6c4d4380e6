import { formatInstant } from '~/domain/time.ts';
import type { MailMessage } from '~/server/services/mail.ts';
import { letter } from './letter.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** The other side says that the reader did not come. */
export const noShowReported = (to: To, byName: string, says: string, until: { readonly answerBy: Date; readonly zone: string; readonly money: string }, link: string): MailMessage =>
  letter(to.email, `${byName} says that you did not come`, to.name, [
    `${byName} reports that you did not come on the agreed day: ${says}`,
    `Answer by ${formatInstant(until.answerBy, until.zone)}. Unanswered, the report stands and the booking ends. ${until.money}`,
    { button: 'Answer', href: link },
  ]);

/** The report was contested; to both sides. */
export const noShowContested = (to: To, byName: string, says: string, link: string): MailMessage =>
  letter(to.email, 'A moderator decides who did not come', to.name, [`${byName} answered: ${says}`, 'A moderator reads both and decides. The money stays held until then.', { button: 'See the booking', href: link }]);

/** A moderator decided that the report does not stand. */
export const noShowDismissed = (to: To, because: string, link: string): MailMessage =>
  letter(to.email, 'The booking goes on', to.name, [`A moderator decided that nobody stayed away: ${because}`, 'The money stays held. Agree on a new day, or cancel.', { button: 'See the booking', href: link }]);
