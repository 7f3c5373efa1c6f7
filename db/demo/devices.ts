import type { DemoPerson } from "@/db/demo/accounts";
import { lines224, slower240 } from "@/db/demo/rasters";
import type { NativeValue, NativeValues } from "@/lib/serial/native";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";

export type DemoBackup = {
  readonly key: string;
  readonly name: string;
  readonly cause: "by-hand" | "before-run" | "after-run";
  /** UTC. */
  readonly at: string;
  /** What changed on the device since the backup before, native. */
  readonly changes: NativeValues;
  readonly activeSlot: number;
  readonly source: SourceFormat | null;
};

export type DemoDevice = {
  readonly key: string;
  readonly owner: DemoPerson;
  readonly name: string;
  readonly driverSlug: string;
  readonly serialNumber: string;
  readonly firmware: string;
  readonly screen: string;
  /** Key of the backup to come back to. */
  readonly knownGood?: string;
  readonly backups: readonly DemoBackup[];
};

const hd: SourceFormat = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
const fullHd: SourceFormat = { activePx: 1920, activeLines: 1080, interlaced: false, fieldRateHz: 60 };
const console480: SourceFormat = { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 59.94 };
const console576: SourceFormat = { activePx: 720, activeLines: 576, interlaced: false, fieldRateHz: 50 };

function slot(number: number, values: Readonly<Record<string, NativeValue>>): NativeValues {
  return Object.fromEntries(Object.entries(values).map(([name, value]) => [`slots[${number}].${name}`, value]));
}

function mode(
  number: number,
  name: string,
  { pixelClockHz, interlaced, horizontal, vertical }: RasterTiming,
): NativeValues {
  const at = `modes[${number}]`;
  const axis = (path: "horizontal" | "vertical", { polarity, ...figures }: RasterTiming["horizontal"]) => ({
    ...Object.fromEntries(Object.entries(figures).map(([part, count]) => [`${at}.timing.${path}.${part}`, count])),
    [`${at}.timing.${path}.polarity`]: polarity === "positive" ? "POS" : "NEG",
  });
  return {
    [`${at}.name`]: name,
    [`${at}.timing.pixelClockHz`]: pixelClockHz / 1000,
    [`${at}.timing.interlaced`]: interlaced ? "I" : "P",
    ...axis("horizontal", horizontal),
    ...axis("vertical", vertical),
  };
}

const cabinetA: readonly DemoBackup[] = [
  {
    key: "a1",
    name: "As delivered",
    cause: "by-hand",
    at: "2026-03-14T09:12:00Z",
    changes: {},
    activeSlot: 1,
    source: hd,
  },
  {
    key: "a2",
    name: "Before the first profile",
    cause: "before-run",
    at: "2026-03-14T10:02:00Z",
    changes: slot(1, { name: "Upright games", syncKind: "SEP" }),
    activeSlot: 1,
    source: hd,
  },
  {
    key: "a3",
    name: "After 240p60 for upright cabinets",
    cause: "after-run",
    at: "2026-03-14T10:06:00Z",
    changes: slot(1, { "placement.widthPct": 976, "placement.heightPct": 976, "placement.offsetPx": 6 }),
    activeSlot: 1,
    source: hd,
  },
  {
    key: "a4",
    name: "Opening night",
    cause: "by-hand",
    at: "2026-04-02T17:40:00Z",
    changes: {
      ...slot(1, { "placement.offsetPx": 9, "placement.offsetLines": -2 }),
      ...slot(4, {
        name: "Arcade night",
        mode: 9,
        syncKind: "SEP",
        "placement.widthPct": 952,
        "placement.offsetPx": 12,
      }),
      ...mode(9, "224p60", lines224),
    },
    activeSlot: 4,
    source: hd,
  },
  {
    key: "a5",
    name: "After the school visit",
    cause: "by-hand",
    at: "2026-05-21T14:31:00Z",
    changes: {
      "everywhere.trim.topLines": 8,
      "everywhere.trim.bottomLines": 8,
      ...slot(4, { "colour.brightnessPct": 132, "placement.offsetPx": -31 }),
    },
    activeSlot: 4,
    source: fullHd,
  },
  {
    key: "a6",
    name: "Still as after the visit",
    cause: "by-hand",
    at: "2026-05-22T08:05:00Z",
    changes: {},
    activeSlot: 4,
    source: null,
  },
];

const cabinetB: readonly DemoBackup[] = [
  {
    key: "b1",
    name: "First backup",
    cause: "by-hand",
    at: "2026-03-20T11:00:00Z",
    changes: { ...slot(1, { name: "Table games" }), ...slot(2, { name: "", mode: 0 }) },
    activeSlot: 1,
    source: console480,
  },
  {
    key: "b2",
    name: "Fan slower",
    cause: "by-hand",
    at: "2026-03-20T11:20:00Z",
    changes: { "native.fanPct": 25, "native.panelLight": 2 },
    activeSlot: 1,
    source: console480,
  },
  {
    key: "b3",
    name: "Line rate nudged",
    cause: "by-hand",
    at: "2026-06-08T16:45:00Z",
    changes: { ...mode(1, "240p60 slow", slower240) },
    activeSlot: 1,
    source: console480,
  },
];

const gallery: readonly DemoBackup[] = [
  {
    key: "g1",
    name: "Installed",
    cause: "by-hand",
    at: "2026-02-11T13:25:00Z",
    changes: {
      ...slot(2, { name: "Film corner", outputKind: "YPP" }),
      ...slot(3, { name: "European tapes", input: "A1" }),
    },
    activeSlot: 2,
    source: hd,
  },
  {
    key: "g2",
    name: "European tapes centred",
    cause: "by-hand",
    at: "2026-02-18T10:10:00Z",
    changes: slot(3, {
      "placement.widthPct": 976,
      "placement.heightPct": 960,
      "placement.offsetPx": 14,
      "placement.offsetLines": -4,
      lineFilter: "SMOOTH",
    }),
    activeSlot: 3,
    source: console576,
  },
  {
    key: "g3",
    name: "Summer exhibition",
    cause: "by-hand",
    at: "2026-07-01T08:55:00Z",
    changes: { "everywhere.powerOnSlot": 2, ...slot(2, { "colour.saturationPct": 88, "placement.widthPct": 960 }) },
    activeSlot: 2,
    source: hd,
  },
];

const workshop: readonly DemoBackup[] = [
  {
    key: "w1",
    name: "Bench device",
    cause: "by-hand",
    at: "2026-01-30T15:00:00Z",
    changes: { "everywhere.powerOnSlot": 5, ...slot(5, { syncKind: "SEP" }) },
    activeSlot: 5,
    source: hd,
  },
  {
    key: "w2",
    name: "All slots filled",
    cause: "by-hand",
    at: "2026-08-19T12:15:00Z",
    changes: {
      ...slot(6, { name: "Monitor 640", mode: 7, syncKind: "SEP" }),
      ...slot(7, { name: "Monitor 576", mode: 6, syncKind: "SEP", input: "D2" }),
      ...slot(8, { name: "Panel check", mode: 8, syncKind: "SEP", input: "D2" }),
    },
    activeSlot: 6,
    source: fullHd,
  },
];

const propSet: readonly DemoBackup[] = [
  {
    key: "p1",
    name: "Before the shoot",
    cause: "by-hand",
    at: "2026-09-03T07:30:00Z",
    changes: { ...slot(1, { name: "Newsreel", "colour.brightnessPct": 82 }), ...slot(2, { name: "Late film" }) },
    activeSlot: 2,
    source: fullHd,
  },
  {
    key: "p2",
    name: "Darker for the lens",
    cause: "by-hand",
    at: "2026-09-03T11:05:00Z",
    changes: {
      ...slot(1, { "colour.brightnessPct": 74, "colour.contrastPct": 90 }),
      ...slot(2, { "colour.brightnessPct": 78 }),
    },
    activeSlot: 1,
    source: fullHd,
  },
];

const gallery1: readonly DemoBackup[] = [
  {
    key: "r1",
    name: "Lent by the school",
    cause: "by-hand",
    at: "2026-06-30T09:00:00Z",
    changes: slot(1, { name: "WALL OF SETS" }),
    activeSlot: 1,
    source: console480,
  },
  {
    key: "r2",
    name: "Second set swapped",
    cause: "by-hand",
    at: "2026-07-22T15:20:00Z",
    changes: {
      ...slot(1, { "placement.offsetPx": -8, "placement.heightPct": 94 }),
      ...slot(2, { "colour.brightnessPct": 106 }),
    },
    activeSlot: 1,
    source: console480,
  },
];

const store: readonly DemoBackup[] = [
  {
    key: "t1",
    name: "From the store room",
    cause: "by-hand",
    at: "2026-08-04T10:30:00Z",
    changes: slot(2, { name: "Long wall", "colour.saturationPct": 90 }),
    activeSlot: 2,
    source: hd,
  },
];

const lf8 = { driverSlug: "lanternfield-lf8", firmware: "3.2" } as const;

/** The museum's devices and what was backed up from them. All simulated, and said to be. */
export const demoDevices: readonly DemoDevice[] = [
  {
    ...lf8,
    key: "cabinet-a",
    owner: "imke",
    name: "Cabinet A, upright",
    serialNumber: "LF8-20417",
    screen: "cabinet-a",
    knownGood: "a4",
    backups: cabinetA,
  },
  {
    ...lf8,
    key: "cabinet-b",
    owner: "imke",
    name: "Cabinet B, table",
    serialNumber: "LF8-20418",
    screen: "cabinet-b",
    knownGood: "b3",
    backups: cabinetB,
  },
  {
    ...lf8,
    key: "gallery-2",
    owner: "imke",
    name: "Gallery 2, living room",
    serialNumber: "LF8-19022",
    screen: "gallery-2",
    knownGood: "g2",
    backups: gallery,
  },
  {
    ...lf8,
    key: "workshop",
    owner: "imke",
    name: "Workshop bench",
    serialNumber: "LF8-21110",
    screen: "workshop",
    backups: workshop,
  },
  {
    ...lf8,
    key: "prop-set",
    owner: "tobin",
    name: "Film prop television",
    serialNumber: "LF8-22340",
    screen: "prop-set",
    knownGood: "p1",
    backups: propSet,
  },
  {
    key: "gallery-1",
    owner: "imke",
    name: "Gallery 1, wall of sets",
    driverSlug: "brackenrow-4r",
    serialNumber: "4R-00871",
    firmware: "2.0",
    screen: "gallery-2",
    knownGood: "r1",
    backups: gallery1,
  },
  {
    key: "store",
    owner: "imke",
    name: "Store room, sixteen slots",
    driverSlug: "ternwick-16",
    serialNumber: "T16-3300",
    firmware: "4.4",
    screen: "gallery-2",
    backups: store,
  },
];
