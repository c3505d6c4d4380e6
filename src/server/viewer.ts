import type { Role } from '~/domain/permissions.ts';

/** Who is asking: the signed-in account as pages and commands see it. Moderator only after the second factor in this session. */
export interface Viewer {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly emailConfirmed: boolean;
  readonly isLandowner: boolean;
  readonly isSawyer: boolean;
  readonly isModerator: boolean;
  /** True for a moderator who has not given the second factor in this session yet. */
  readonly secondFactorDue: boolean;
  readonly active: boolean;
  /** The session's public id. */
  readonly sessionId: string;
  /** Unread messages. */
  readonly unread: number;
  /** True when the terms have changed since this account accepted them. */
  readonly termsDue?: boolean;
}

/** A deed done by the clock or by the payment provider's message rather than by a person. */
export interface System {
  readonly id: null;
  readonly name: string;
}

export type Actor = Viewer | System;

/** `system('sweep')`: the actor of a sweep, a webhook or the demo's clock. */
export const system = (name: string): System => ({ id: null, name });

/** The roles an account has everywhere, before any thing is looked at. */
export function baseRoles(viewer: Viewer | null): Set<Role> {
  const roles = new Set<Role>();
  if (!viewer) return roles;
  if (!viewer.active) return roles.add('suspended');
  if (viewer.emailConfirmed) roles.add('member');
  if (viewer.emailConfirmed && viewer.isSawyer) roles.add('anySawyer');
  if (viewer.isModerator) roles.add('moderator');
  return roles;
}
