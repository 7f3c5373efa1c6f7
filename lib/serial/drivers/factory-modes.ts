/** Active, front porch, sync, back porch. */
export type FactoryAxis = readonly [active: number, frontPorch: number, sync: number, backPorch: number];

/** A mode that a new device comes with. Vertical figures count lines per field. */
export type FactoryMode = {
  readonly name: string;
  readonly clockKHz: number;
  readonly interlaced: boolean;
  readonly across: FactoryAxis;
  readonly down: FactoryAxis;
  readonly positive: boolean;
};

const mode = (name: string, interlaced: boolean, across: FactoryAxis, down: FactoryAxis, clockKHz = 27_000, positive = false): FactoryMode => ({
  name, clockKHz, interlaced, across, down, positive,
});

/** Figures: CTA-861, the VIC stands beside each. */
export const FACTORY_MODES: readonly FactoryMode[] = [
  mode("240p60", false, [1440, 38, 124, 114], [240, 4, 3, 15]), // VIC 8, 262 lines
  mode("480i60", true, [1440, 38, 124, 114], [240, 4, 3, 15]), // VIC 6
  mode("288p50", false, [1440, 24, 126, 138], [288, 2, 3, 19]), // VIC 23, 312 lines
  mode("576i50", true, [1440, 24, 126, 138], [288, 2, 3, 19]), // VIC 21
  mode("480p60", false, [720, 16, 62, 60], [480, 9, 6, 30]), // VIC 2
  mode("576p50", false, [720, 12, 64, 68], [576, 5, 5, 39]), // VIC 17
  mode("480p60 640", false, [640, 16, 96, 48], [480, 10, 2, 33], 25_200), // VIC 1 at 60 Hz
  mode("720p60", false, [1280, 110, 40, 220], [720, 5, 5, 20], 74_250, true), // VIC 4
];

type Native = number | string;

/** How a device holds what a mode is made of. */
export type ModeWords = {
  readonly clock: (kHz: number) => Native;
  readonly scan: readonly [progressive: Native, interlaced: Native];
  readonly polarity: readonly [negative: Native, positive: Native];
  /** Whether modes have names. */
  readonly named: boolean;
};

/** Native values of the first modes of a new device, by key. */
export function factoryModes(modes: readonly FactoryMode[], words: ModeWords): Record<string, Native> {
  const values: Record<string, Native> = {};
  modes.forEach(({ name, clockKHz, interlaced, across, down, positive }, index) => {
    const at = `modes[${index + 1}]`;
    if (words.named) values[`${at}.name`] = name;
    values[`${at}.timing.pixelClockHz`] = words.clock(clockKHz);
    values[`${at}.timing.interlaced`] = words.scan[interlaced ? 1 : 0];
    for (const [axis, figures] of [["horizontal", across], ["vertical", down]] as const) {
      ["active", "frontPorch", "sync", "backPorch"].forEach((part, place) => {
        values[`${at}.timing.${axis}.${part}`] = figures[place] ?? 0;
      });
      values[`${at}.timing.${axis}.polarity`] = words.polarity[positive ? 1 : 0];
    }
  });
  return values;
}

/** Names and modes of a new device's first slots. */
export function factorySlots(slots: readonly (readonly [name: string, mode: number])[]): Record<string, Native> {
  return Object.fromEntries(slots.flatMap(([name, modeNumber], index) => [[`slots[${index + 1}].name`, name], [`slots[${index + 1}].mode`, modeNumber]]));
}

/** CTA-861 VIC 2, for devices that put it out when they have nothing else to show. */
export const IDLE_480P60 = {
  pixelClockHz: 27_000_000, interlaced: false,
  horizontal: { active: 720, frontPorch: 16, sync: 62, backPorch: 60, polarity: "negative" },
  vertical: { active: 480, frontPorch: 9, sync: 6, backPorch: 30, polarity: "negative" },
} as const;
