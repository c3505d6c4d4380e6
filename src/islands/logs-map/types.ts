/** A listing of the list beside the map: its coarse point and what its mark says. */
export interface MapPlace {
  readonly number: number;
  readonly title: string;
  readonly lat: number;
  readonly lng: number;
  readonly distanceMi: number | null;
  /** Largest end over the bark, in; sets the mark's size. */
  readonly largestIn: number;
}

export interface MapTown {
  readonly name: string;
  readonly lat: number;
  readonly lng: number;
}

export interface MapContent {
  readonly from: { readonly lat: number; readonly lng: number } | null;
  readonly radiusMi: number | null;
  readonly places: readonly MapPlace[];
  readonly towns: readonly MapTown[];
  /** The filters of the tiles, as a query; null when tiles cannot be filtered as the list is, and only its rows are shown. */
  readonly tiles: string | null;
  /** This page's address without a place, to which a point of the map is added. */
  readonly here: string;
}

export interface MapEvents {
  readonly onLight: (number: number | null) => void;
  readonly onChoose: (number: number) => void;
  /** The map's middle, after the reader has moved it. */
  readonly onMiddle: (point: { lat: number; lng: number }) => void;
}

export interface MapHandle {
  readonly light: (number: number | null) => void;
  readonly remove: () => void;
}
