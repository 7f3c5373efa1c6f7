import { fullHd, fullHd50, hd, mode, profile, slot } from "@/db/demo/profiles/parts";
import type { DemoProfile } from "@/db/demo/profiles/parts";
import { standardRaster } from "@/lib/timing/standards";

const filmSlots = (brightnessPct: number) => [
  slot(1, {
    name: "Newsreel",
    input: "digital-1",
    expects: fullHd,
    mode: "i",
    syncKind: "composite",
    colour: { brightnessPct },
  }),
  slot(2, {
    name: "Late film",
    input: "digital-1",
    expects: fullHd,
    mode: "i",
    syncKind: "composite",
    colour: { brightnessPct: brightnessPct + 4 },
  }),
  slot(3, { name: "Test card", input: "digital-2", expects: hd, mode: "p", syncKind: "composite" }),
];

const film = {
  title: "Film prop television, dimmed",
  summary: "Three slots that stay dark enough for a lens a metre away.",
  screen: "prop-set",
  modes: [mode("i", "480i60"), mode("p", "240p60")],
};

/** Profiles for televisions and monitors. */
export const televisionProfiles: readonly DemoProfile[] = [
  {
    key: "living-room",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-02-11T14:00:00Z",
        note: "",
        document: profile({
          title: "480i60 for the living-room set",
          summary: "Film corner by component, composite sync beside it.",
          screen: "gallery-2",
          modes: [mode("i", "480i60")],
          slots: [
            slot(2, {
              name: "Film corner",
              input: "digital-1",
              expects: hd,
              mode: "i",
              syncKind: "composite",
              outputKind: "YPbPr",
              placement: { widthPct: 96 },
            }),
          ],
        }),
      },
      {
        at: "2026-07-01T08:40:00Z",
        note: "Paler for the summer exhibition.",
        document: profile({
          title: "480i60 for the living-room set",
          summary: "Film corner by component, composite sync beside it.",
          screen: "gallery-2",
          modes: [mode("i", "480i60")],
          slots: [
            slot(2, {
              name: "Film corner",
              input: "digital-1",
              expects: hd,
              mode: "i",
              syncKind: "composite",
              outputKind: "YPbPr",
              placement: { widthPct: 96 },
              colour: { saturationPct: 88 },
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "pair-50",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-02-18T10:30:00Z",
        note: "",
        document: profile({
          title: "50 Hz pair: 288p50 and 576i50",
          summary: "European tapes and early home computers in two slots.",
          screen: "gallery-2",
          modes: [mode("p", "288p50"), mode("i", "576i50")],
          slots: [
            slot(3, {
              name: "Home computers",
              input: "digital-1",
              expects: fullHd50,
              mode: "p",
              syncKind: "composite",
              placement: { widthPct: 97.6, heightPct: 96, offsetPx: 14, offsetLines: -4 },
            }),
            slot(4, {
              name: "European tapes",
              input: "analogue-1",
              expects: { activePx: 720, activeLines: 576, interlaced: true, fieldRateHz: 50 },
              mode: "i",
              syncKind: "composite",
              lineFilter: "smooth",
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "wide-288",
    owner: "maren",
    visibility: "shared",
    revisions: [
      {
        at: "2026-05-30T21:45:00Z",
        note: "Made on a 16:9 tube; circles are too tall on any other.",
        document: {
          ...profile({
            title: "Wide 288p50, made for 16:9",
            summary: "For a wide tube. On a 4:3 set circles come out too tall.",
            modes: [mode("p", "288p50")],
            slots: [slot(3, { name: "Wide", input: "digital-1", expects: fullHd50, mode: "p", syncKind: "composite" })],
          }),
          madeFor: {
            driver: { slug: "lanternfield-lf8", firmware: "3.2" },
            screen: {
              name: "Wide tube, 16:9",
              bands: [{ lineRateHz: [15_469, 15_781], fieldRateHz: [48.5, 51.5] }],
              interlace: true,
              syncKinds: ["composite"],
              aspect: "16:9",
              sources: { bands: "standard", aspect: "measured" },
            },
          },
        },
      },
    ],
  },
  {
    key: "hot-sync",
    owner: "maren",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-02T09:00:00Z",
        note: "Measured 1.05 V into 75 Ω.",
        document: profile({
          title: "Composite sync at full strength",
          summary: "Fits a cabinet. A television input wants about a third of this level: measure first.",
          modes: [mode("a", "240p60")],
          slots: [slot(1, { name: "Strong sync", input: "digital-1", expects: hd, mode: "a", syncKind: "composite" })],
        }),
      },
    ],
  },
  {
    key: "monitor-31k",
    owner: "imke",
    visibility: "shared",
    revisions: [
      {
        at: "2026-08-19T12:30:00Z",
        note: "",
        document: profile({
          title: "31 kHz monitor: 480p60 and 640 px",
          summary: "Two progressive modes for a monitor of one rate. Far too fast for a 15 kHz set.",
          screen: "workshop",
          modes: [mode("a", "480p60"), mode("b", "480p60-640")],
          slots: [
            slot(5, { name: "Monitor 480", input: "digital-1", expects: hd, mode: "a", syncKind: "separate" }),
            slot(6, { name: "Monitor 640", input: "digital-1", expects: hd, mode: "b", syncKind: "separate" }),
          ],
        }),
      },
    ],
  },
  {
    key: "film-prop",
    owner: "tobin",
    visibility: "shared",
    revisions: [
      { at: "2026-09-03T07:10:00Z", note: "For the first day.", document: profile({ ...film, slots: filmSlots(82) }) },
      {
        at: "2026-09-03T10:50:00Z",
        note: "Darker after the rushes.",
        document: profile({ ...film, slots: filmSlots(74) }),
      },
      {
        at: "2026-09-05T06:55:00Z",
        note: "A little up again, and cut two lines that flickered at the top.",
        document: profile({ ...film, everywhere: { trim: { topLines: 2 } }, slots: filmSlots(78) }),
      },
    ],
  },
  {
    key: "between-steps",
    owner: "maren",
    visibility: "shared",
    revisions: [
      {
        at: "2026-06-20T13:00:00Z",
        note: "",
        document: profile({
          title: "Sizes between the steps, and too bright",
          summary: "97.5 % lies between two steps of the LF-8, and a contrast of 160 % beyond its range.",
          modes: [mode("a", "240p60")],
          slots: [
            slot(1, {
              name: "Between",
              input: "digital-1",
              expects: hd,
              mode: "a",
              syncKind: "composite",
              placement: { widthPct: 97.5, heightPct: 97.5 },
            }),
            slot(2, {
              name: "Too bright",
              input: "digital-1",
              expects: hd,
              mode: "a",
              syncKind: "composite",
              colour: { contrastPct: 160 },
            }),
          ],
        }),
      },
    ],
  },
  {
    key: "unfinished",
    owner: "imke",
    visibility: "private",
    revisions: [
      {
        at: "2026-10-12T18:25:00Z",
        note: "Third slot still without its mode.",
        document: profile({
          title: "Autumn gallery, unfinished",
          screen: "gallery-2",
          modes: [{ key: "p", name: "240p60", timing: standardRaster("240p60").timing }],
          slots: [
            slot(1, { name: "Opening", input: "digital-1", mode: "p", syncKind: "composite" }),
            slot(2, { name: "Tapes", input: "analogue-1", mode: "missing", syncKind: "composite" }),
          ],
        }),
      },
    ],
  },
];
