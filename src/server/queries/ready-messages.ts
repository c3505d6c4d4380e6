import { authorize } from '../authorize.ts';
import { ReadyMessage } from '../models/sawyer.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

export interface ReadyMessageView {
  readonly id: string;
  readonly name: string;
  readonly body: string;
}

/** The messages a sawyer keeps ready for bids, by name. Leans on ready_message_of_sawyer. @throws Refusal when the viewer is no sawyer */
export async function readyMessages(viewer: Viewer | null): Promise<readonly ReadyMessageView[]> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  const kept = await ReadyMessage.findAll({ where: { sawyerId: viewer.id }, order: [['name', 'ASC'], ['id', 'ASC']] });
  return kept.map(({ id, name, body }) => ({ id, name, body }));
}
