import { certificateKinds, runsOutSoon, type CertificateKind } from '~/domain/certificate.ts';
import type { Day } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import { Certificate, SawyerProfile } from '../models/sawyer.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface OwnCertificate {
  readonly kind: CertificateKind;
  /** The one that waits for a moderator. */
  readonly waits: { readonly sentAt: Date; readonly saysUntil: Day } | null;
  /** The last day of the one a moderator saw. */
  readonly seenUntil: Day | null;
  /** Whether that day has passed, or comes so soon that the next one should be sent. */
  readonly standing: 'none' | 'good' | 'soon' | 'expired';
}

export interface CertificatePage {
  readonly hasProfile: boolean;
  readonly certificates: readonly OwnCertificate[];
}

/** A sawyer's own certificates, one of each kind. @throws Refusal `forbidden` for anybody else */
export async function certificatePage(viewer: Viewer | null, at: Date): Promise<CertificatePage> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const hasProfile = (await SawyerProfile.count({ where: { accountId: viewer.id } })) > 0;
  const found = await Certificate.findAll({ where: { sawyerId: viewer.id } });
  const today = at.toISOString().slice(0, 10);
  return {
    hasProfile,
    certificates: certificateKinds.map((kind): OwnCertificate => {
      const one = found.find((row) => row.kind === kind);
      const until = one?.expiresOn ?? null;
      return {
        kind,
        waits: one?.sentAt && one.saysUntil ? { sentAt: one.sentAt, saysUntil: one.saysUntil } : null,
        seenUntil: until,
        standing: until === null ? 'none' : until < today ? 'expired' : runsOutSoon(until, today) ? 'soon' : 'good',
      };
    }),
  };
}
