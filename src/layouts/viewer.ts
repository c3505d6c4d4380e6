/** Who is looking, as the middleware puts it in `Astro.locals.viewer`; null for a visitor. Only what the chrome needs. */
export interface Viewer {
  readonly id: string;
  readonly name: string;
  readonly isLandowner: boolean;
  readonly isSawyer: boolean;
  readonly isModerator: boolean;
  readonly unread: number;
  readonly termsDue?: boolean;
}
