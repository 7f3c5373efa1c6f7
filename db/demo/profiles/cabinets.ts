import { console480, hd, mode, profile, slot, tripled240 } from "@/db/demo/profiles/parts";
import type { DemoProfile } from "@/db/demo/profiles/parts";
import { lines224, lines270, shortSync, thinBackPorch } from "@/db/demo/rasters";

const upright = {
  title: "240p60 for upright cabinets",
  summary: "One slot for 240-line games on a horizontal 15 kHz cabinet.",
  screen: "cabinet-a",
  modes: [mode("a", "240p60")],
};

const uprightSlot = {
  name: "Upright games",
  input: "digital-1",
  expects: tripled240,
  mode: "a",
  syncKind: "separate",
  outputKind: "RGB",
} as const;

/** Profiles for the 15 kHz cabinets: some that fit and some that a check stops. */
export const cabinetProfiles: readonly DemoProfile[] = [
  {
    key: "upright-240",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-03-14T09:40:00Z",
        note: "First version, full size.",
        document: profile({
          ...upright,
          slots: [slot(1, { ...uprightSlot, placement: { widthPct: 100, heightPct: 100 } })],
        }),
      },
      {
        at: "2026-03-14T10:00:00Z",
        note: "Smaller, so that scores at the edge can be read.",
        document: profile({
          ...upright,
          slots: [
            slot(1, { ...uprightSlot, placement: { widthPct: 97.6, heightPct: 97.6, offsetPx: 6, offsetLines: 0 } }),
          ],
        }),
      },
      {
        at: "2026-04-03T08:15:00Z",
        note: "Moved after opening night; line filter named.",
        document: profile({
          ...upright,
          notes: "Stand one metre back when you judge the edges. The set needs twenty minutes to warm up.",
          slots: [
            slot(1, {
              ...uprightSlot,
              placement: { widthPct: 97.6, heightPct: 97.6, offsetPx: 9, offsetLines: -2 },
              colour: { brightnessPct: 104 },
              lineFilter: "area",
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "arcade-224",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-04-02T16:30:00Z",
        note: "",
        document: profile({
          title: "224 lines for early boards",
          summary: "The totals of 240p60 with 224 lines shown, so nothing is stretched.",
          screen: "cabinet-a",
          modes: [mode("a", lines224, "224p60")],
          slots: [
            slot(4, { name: "Arcade night", input: "digital-1", expects: tripled240, mode: "a", syncKind: "separate" }),
          ],
        }),
      },
    ],
  },
  {
    key: "too-tall",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-05-06T19:20:00Z",
        note: "Looked fine on another device, which cut the picture.",
        document: profile({
          title: "Tall picture for cabinet A",
          summary: "110 % high, three lines up. A device that refuses what is outside its raster will not take it.",
          screen: "cabinet-a",
          modes: [mode("a", "240p60")],
          slots: [
            slot(1, { ...uprightSlot, placement: { widthPct: 100, heightPct: 110, offsetPx: 0, offsetLines: -3 } }),
            slot(4, {
              name: "Arcade night",
              input: "digital-1",
              mode: "a",
              syncKind: "separate",
              placement: { heightPct: 100 },
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "table-games",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-03-20T11:30:00Z",
        note: "",
        document: profile({
          title: "Table cabinet, 240 and 480 lines",
          summary: "480i60 is in it for other sets: the table's own monitor takes no interlaced mode.",
          screen: "cabinet-b",
          modes: [mode("p", "240p60"), mode("i", "480i60")],
          slots: [
            slot(1, { name: "Table games", input: "digital-1", expects: console480, mode: "p", syncKind: "composite" }),
            slot(2, { name: "Interlaced", input: "digital-1", expects: console480, mode: "i", syncKind: "composite" }),
          ],
        }),
      },
    ],
  },
  {
    key: "lines-270",
    owner: "tobin",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-11T20:05:00Z",
        note: "Four times fewer lines than 1080.",
        document: profile({
          title: "270 lines at 54 Hz",
          summary: "Each output line from exactly four lines of a 1080-line source, on sets that bear 54 Hz.",
          modes: [mode("a", lines270, "270p54")],
          slots: [
            slot(1, {
              name: "Four to one",
              input: "digital-1",
              expects: { ...hd, activePx: 1920, activeLines: 1080 },
              mode: "a",
              syncKind: "composite",
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "short-sync",
    owner: "tobin",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-14T18:00:00Z",
        note: "",
        document: profile({
          title: "Short sync, an experiment",
          summary: "A line sync of 2.2 µs. Kept here to show what a check says of it.",
          modes: [mode("a", shortSync, "short sync 240p")],
          slots: [slot(1, { name: "Short sync", input: "digital-1", expects: hd, mode: "a", syncKind: "composite" })],
        }),
      },
    ],
  },
  {
    key: "thin-porch",
    owner: "tobin",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-15T17:10:00Z",
        note: "Picture 1.6 µs further left.",
        document: profile({
          title: "Picture far left by the porches",
          summary: "A back porch of 2.6 µs: some sets take their black from it and go darker.",
          modes: [mode("a", thinBackPorch, "240p60 left")],
          slots: [slot(1, { name: "Far left", input: "digital-1", expects: hd, mode: "a", syncKind: "composite" })],
        }),
      },
    ],
  },
  {
    key: "straight-in",
    owner: "tobin",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-27T15:35:00Z",
        note: "Needs something that doubles the lines before the device.",
        document: profile({
          title: "Straight from a console",
          summary: "240 lines into a digital input that does not lock to them, and 1080 interlaced lines by cable.",
          modes: [mode("a", "240p60")],
          slots: [
            slot(1, {
              name: "240 lines in",
              input: "digital-1",
              expects: { activePx: 720, activeLines: 240, interlaced: false, fieldRateHz: 60.05 },
              mode: "a",
              syncKind: "composite",
            }),
            slot(2, {
              name: "1080 by cable",
              input: "component-1",
              expects: { activePx: 1920, activeLines: 1080, interlaced: true, fieldRateHz: 60 },
              mode: "a",
              syncKind: "composite",
            }),
          ],
        }),
      },
    ],
  },
];
