import type { EnvelopeLimit, LimitSource, ScreenEnvelope, Span } from "@/lib/timing/envelope";

/** Where one limit of a preset comes from, in words. */
export type LimitBasis = { readonly source: LimitSource; readonly note: string };

/** An envelope to start from. Its `envelope.sources` repeats the sources of `basis`. */
export type ScreenPreset = {
  readonly id: "bt470-525" | "bt470-625" | "bt470-both" | "vic1-31k";
  readonly envelope: ScreenEnvelope;
  readonly basis: Readonly<Partial<Record<EnvelopeLimit, LimitBasis>>>;
};

const fieldRate60: Span = [58.44, 61.44];
const fieldRate50: Span = [48.5, 51.5];
const band525 = { lineRateHz: [15_577, 15_892], fieldRateHz: fieldRate60 } as const;
const band625 = { lineRateHz: [15_469, 15_781], fieldRateHz: fieldRate50 } as const;

const television = {
  interlace: true,
  syncKinds: ["composite"],
  aspect: "4:3",
  minSyncUs: 4.5,
  syncVpp: [0.2, 0.6],
  loadOhm: 75,
} as const;

const televisionBasis = {
  bands: {
    source: "standard",
    note: "ITU-R BT.470-5: 15 734.266 and 15 625 Hz. The tolerance of 1 % and 1.5 Hz is ours, cautious, no source: the set's service literature decides.",
  },
  interlace: { source: "standard", note: "ITU-R BT.470-5: both systems are interlaced." },
  syncKinds: { source: "standard", note: "ITU-R BT.470-5: one composite sync." },
  aspect: { source: "standard", note: "ITU-R BT.470-5." },
  minSyncUs: { source: "guess", note: "A little under BT.470's 4.7 µs; ours, no source." },
  syncVpp: { source: "guess", note: "0.3 V is nominal; 0.2 to 0.6 V are ours, no source." },
  loadOhm: { source: "standard", note: "75 Ω, the impedance of video." },
} as const satisfies ScreenPreset["basis"];

const fieldBlank525 = { source: "standard", note: "ITU-R BT.470-5: 19 lines of 63.56 µs for 525/60." } as const;
const fieldBlank625 = {
  source: "guess",
  note: "A little under CTA-861's 24 lines (BT.470 has 25 for 625/50); ours, no source.",
} as const;

const monitorBasis = {
  bands: {
    source: "standard",
    note: "CTA-861 codes 1 to 3: 31.469 kHz. The tolerance of 1 % and 1.5 Hz is ours, cautious, no source.",
  },
  interlace: { source: "standard", note: "CTA-861 codes 1 to 3 are progressive." },
  syncKinds: { source: "guess", note: "Most monitors of this rate take separate syncs; no source." },
  aspect: { source: "guess", note: "By what stands there." },
  minSyncUs: {
    source: "guess",
    note: "The shortest sync of CTA-861 codes 1 to 3 is 2.30 µs; a little under it, ours.",
  },
} as const satisfies ScreenPreset["basis"];

function sourcesOf(basis: ScreenPreset["basis"]): ScreenEnvelope["sources"] {
  return Object.fromEntries(Object.entries(basis).map(([limit, { source }]) => [limit, source]));
}

function preset(
  id: ScreenPreset["id"],
  envelope: Omit<ScreenEnvelope, "sources">,
  basis: ScreenPreset["basis"],
): ScreenPreset {
  return { id, basis, envelope: { ...envelope, sources: sourcesOf(basis) } };
}

/** Envelopes of screen classes. How much a frame hides is known for none of them: by what the owner sees. */
export const screenPresets: readonly ScreenPreset[] = [
  preset(
    "bt470-525",
    { name: "525-line television", bands: [band525], ...television, minFieldBlankUs: 1207 },
    { ...televisionBasis, minFieldBlankUs: fieldBlank525 },
  ),
  preset(
    "bt470-625",
    { name: "625-line television", bands: [band625], ...television, minFieldBlankUs: 1500 },
    { ...televisionBasis, minFieldBlankUs: fieldBlank625 },
  ),
  preset(
    "bt470-both",
    { name: "525- and 625-line television", bands: [band625, band525], ...television, minFieldBlankUs: 1207 },
    { ...televisionBasis, minFieldBlankUs: fieldBlank525 },
  ),
  preset(
    "vic1-31k",
    {
      name: "31 kHz monitor, one rate",
      bands: [{ lineRateHz: [31_154, 31_784], fieldRateHz: fieldRate60 }],
      interlace: false,
      syncKinds: ["separate"],
      aspect: "4:3",
      minSyncUs: 2,
    },
    monitorBasis,
  ),
];
