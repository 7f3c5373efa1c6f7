import type { DemoPerson } from "@/db/demo/accounts";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { screenPresets } from "@/lib/timing/screen-presets";

export type DemoScreen = {
  readonly key: string;
  readonly owner: DemoPerson;
  readonly envelope: ScreenEnvelope;
  readonly presetId?: string;
  readonly notes: string;
};

function preset(id: string): ScreenEnvelope {
  const found = screenPresets.find((one) => one.id === id);
  if (found === undefined) throw new Error(`no preset ${id}`);
  return found.envelope;
}

/** Displays of the museum. The figures of the cabinets are invented; those of the presets keep their sources. */
export const demoScreens: readonly DemoScreen[] = [
  {
    key: "cabinet-a",
    owner: "imke",
    envelope: {
      name: "Cabinet A, upright",
      bands: [{ lineRateHz: [15_500, 15_900], fieldRateHz: [47, 63] }],
      interlace: true,
      syncKinds: ["separate", "composite"],
      syncVpp: [0.7, 5],
      loadOhm: 1000,
      minSyncUs: 4,
      minBackPorchUs: 3.4,
      minFieldBlankUs: 1100,
      aspect: "4:3",
      visiblePct: { left: 1, right: 1, top: 2.5, bottom: 2.5 },
      sources: {
        bands: "service-literature",
        interlace: "service-literature",
        syncKinds: "service-literature",
        syncVpp: "measured",
        loadOhm: "measured",
        minSyncUs: "service-literature",
        minBackPorchUs: "guess",
        minFieldBlankUs: "service-literature",
        aspect: "measured",
        visiblePct: "measured",
      },
    },
    notes: "Chassis replaced in March. Service sheet in the red folder, second shelf.",
  },
  {
    key: "cabinet-b",
    owner: "imke",
    envelope: {
      name: "Cabinet B, table",
      bands: [{ lineRateHz: [15_600, 15_850], fieldRateHz: [55, 62] }],
      interlace: false,
      syncKinds: ["composite"],
      syncVpp: [0.7, 4],
      loadOhm: 1000,
      minSyncUs: 4,
      minFieldBlankUs: 1100,
      aspect: "3:4",
      sources: {
        bands: "service-literature",
        interlace: "guess",
        syncKinds: "service-literature",
        syncVpp: "service-literature",
        loadOhm: "guess",
        minSyncUs: "guess",
        minFieldBlankUs: "guess",
        aspect: "measured",
      },
    },
    notes: "Stands on its side. Flickers badly with interlaced modes, so they are ruled out here.",
  },
  {
    key: "gallery-2",
    owner: "imke",
    envelope: {
      ...preset("bt470-both"),
      name: "Gallery 2, living-room television",
      visiblePct: { left: 3, right: 3, top: 4, bottom: 4 },
      sources: { ...preset("bt470-both").sources, visiblePct: "measured" },
    },
    presetId: "bt470-both",
    notes: "Wood veneer set with a composite and a component input.",
  },
  {
    key: "workshop",
    owner: "imke",
    envelope: { ...preset("vic1-31k"), name: "Workshop monitor, 31 kHz" },
    presetId: "vic1-31k",
    notes: "For looking at a device before it goes out to a cabinet.",
  },
  {
    key: "prop-set",
    owner: "tobin",
    envelope: { ...preset("bt470-525"), name: "Film prop set, 525 lines" },
    presetId: "bt470-525",
    notes: "On loan until the end of the season.",
  },
];
