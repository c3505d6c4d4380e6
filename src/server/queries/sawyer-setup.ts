import type { RateCard as Card } from '~/domain/trade/rate-card.ts';
import { authorize } from '../authorize.ts';
import { currentCard } from '../bid-work.ts';
import { Mill, SawyerProfile } from '../models/sawyer.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** What a sawyer must have before a bid can be worked out. */
export type Missing = 'profile' | 'mill' | 'rates';

export interface SawyerSetUp {
  readonly profile: SawyerProfile | null;
  readonly mills: readonly Mill[];
  readonly card: Card | null;
  /** In the order a sawyer fills them in. */
  readonly missing: readonly Missing[];
}

/** A sawyer's profile, mills in use and rate card. @throws Refusal when the viewer is no sawyer. */
export async function sawyerSetUp(viewer: Viewer | null): Promise<SawyerSetUp> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  return setUpOf(viewer.id);
}

/** The same for an account already known to be a sawyer. */
export async function setUpOf(sawyerId: string): Promise<SawyerSetUp> {
  const profile = await SawyerProfile.findByPk(sawyerId);
  const mills = await Mill.findAll({ where: { sawyerId, retiredAt: null }, order: [['createdAt', 'ASC'], ['id', 'ASC']] });
  const card = await currentCard(sawyerId);
  const missing: Missing[] = [...(profile?.base ? [] : ['profile' as const]), ...(mills.length > 0 ? [] : ['mill' as const]), ...(card ? [] : ['rates' as const])];
  return { profile, mills, card, missing };
}
