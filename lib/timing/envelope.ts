/** Inclusive range, ends in the unit of the name that carries it. */
export type Span = readonly [min: number, max: number];

/** A stretch of line rates with the field rates it holds for. */
export type EnvelopeBand = { readonly lineRateHz: Span; readonly fieldRateHz: Span };

export type SyncKind = "separate" | "composite" | "onGreen" | "onLuma";

/** Where a limit of a screen comes from. */
export type LimitSource = "service-literature" | "edid" | "standard" | "measured" | "guess";

/** Names of the limits of a screen envelope that can carry a source. */
export type EnvelopeLimit =
  | "bands"
  | "interlace"
  | "maxPixelClockHz"
  | "syncKinds"
  | "syncVpp"
  | "loadOhm"
  | "minSyncUs"
  | "minBackPorchUs"
  | "minFieldBlankUs"
  | "aspect"
  | "visiblePct";

export type VisiblePct = {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
};

/**
 * What a screen takes. What is missing is unknown, and a check says so.
 *
 * `visiblePct` is what the frame hides at each edge, in % of the active raster (0 = all is seen).
 * `aspect` is width : height as it stands ("4:3", "16:9", "3:4" for an upright set).
 */
export type ScreenEnvelope = {
  readonly name: string;
  readonly bands: readonly EnvelopeBand[];
  readonly interlace?: boolean | undefined;
  readonly maxPixelClockHz?: number | undefined;
  readonly syncKinds?: readonly SyncKind[] | undefined;
  /** Sync level at the input, peak to peak, into `loadOhm`. */
  readonly syncVpp?: Span | undefined;
  readonly loadOhm?: number | undefined;
  readonly minSyncUs?: number | undefined;
  readonly minBackPorchUs?: number | undefined;
  /** Field blanking (front porch + sync + back porch), in µs. */
  readonly minFieldBlankUs?: number | undefined;
  readonly aspect?: string | undefined;
  readonly visiblePct?: VisiblePct | undefined;
  readonly sources?: Readonly<Partial<Record<EnvelopeLimit, LimitSource>>> | undefined;
};
