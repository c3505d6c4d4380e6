import { authorize } from '../authorize.ts';
import { SawyerProfile } from '../models/sawyer.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface CertificatePage {
  readonly hasProfile: boolean;
  /** The one that waits for a moderator. */
  readonly waits: { readonly sentAt: Date; readonly saysUntil: string } | null;
  /** What landowners read, while it has not expired. */
  readonly expiresOn: string | null;
}

/** A sawyer's own certificate of insurance. @throws Refusal `forbidden` for anybody else */
export async function certificatePage(viewer: Viewer | null, at: Date): Promise<CertificatePage> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const profile = await SawyerProfile.findByPk(viewer.id);
  const expiresOn = profile?.certificateSeenAt ? profile.certificateExpiresOn : null;
  return {
    hasProfile: profile !== null,
    waits: profile?.certificateSentAt && profile.certificateSaysUntil ? { sentAt: profile.certificateSentAt, saysUntil: profile.certificateSaysUntil } : null,
    expiresOn: expiresOn !== null && expiresOn >= at.toISOString().slice(0, 10) ? expiresOn : null,
  };
}
