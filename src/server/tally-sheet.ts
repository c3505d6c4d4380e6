import type { Settlement } from '~/domain/trade/settlement.ts';
import { tallyPdf } from './documents/tally-pdf.ts';
import { Listing, type Booking } from './models/index.ts';
import { partiesOf } from './parties.ts';
import type { MailMessage } from './services/mail.ts';
import { tallyView } from './tally-view.ts';
import type { TallyWork } from './tally-work.ts';

/** A letter with the tally's sheet, as this side may read it, put to it. */
export async function withTallySheet(message: MailMessage, booking: Booking, work: TallyWork, side: 'landowner' | 'sawyer'): Promise<MailMessage> {
  const { landowner, sawyer } = await partiesOf(booking);
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const { tally } = work;
  const sheet = await tallyPdf({
    number: booking.number, title: listing.title ?? '', landownerName: landowner.name, sawyerName: sawyer.name, timeZone: booking.timeZone,
    view: await tallyView(booking, work), settlement: (tally.settlement as Settlement | null) ?? work.settlement, sha256: work.sha256,
    signedAt: tally.signedAt, signedName: tally.signedName, signedBy: tally.signedBy, signature: tally.signature, side,
  });
  return { ...message, attachments: [{ filename: `tally-${booking.number}.pdf`, contentType: 'application/pdf', content: Buffer.from(sheet).toString('base64') }] };
}
