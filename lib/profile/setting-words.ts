/** What a setting acts on: every slot, every slot with that mode, or that slot alone. */
export type Reach = "everywhere" | "mode" | "slot";

export type SettingWords = {
  readonly label: string;
  readonly unit?: string | undefined;
  readonly reach: Reach;
  /** Slot number or mode key that the path names. */
  readonly of?: string | undefined;
};

const WORDS: Readonly<Record<string, readonly [label: string, unit?: string]>> = {
  "everywhere.trim.leftPx": ["Trim left", "px"],
  "everywhere.trim.rightPx": ["Trim right", "px"],
  "everywhere.trim.topLines": ["Trim top", "lines"],
  "everywhere.trim.bottomLines": ["Trim bottom", "lines"],
  "everywhere.powerOnSlot": ["Slot at switch-on"],
  "modes[*].name": ["Mode name"],
  "modes[*].timing": ["Raster"],
  "modes[*].timing.pixelClockHz": ["Pixel clock", "Hz"],
  "modes[*].timing.interlaced": ["Scan"],
  "modes[*].timing.equalFields": ["Fields of equal length"],
  "modes[*].timing.horizontal.active": ["Active px", "px"],
  "modes[*].timing.horizontal.frontPorch": ["Horizontal front porch", "px"],
  "modes[*].timing.horizontal.sync": ["Horizontal sync", "px"],
  "modes[*].timing.horizontal.backPorch": ["Horizontal back porch", "px"],
  "modes[*].timing.horizontal.polarity": ["Horizontal sync polarity"],
  "modes[*].timing.vertical.active": ["Active lines", "lines"],
  "modes[*].timing.vertical.frontPorch": ["Vertical front porch", "lines"],
  "modes[*].timing.vertical.sync": ["Vertical sync", "lines"],
  "modes[*].timing.vertical.backPorch": ["Vertical back porch", "lines"],
  "modes[*].timing.vertical.polarity": ["Vertical sync polarity"],
  "slots[*].name": ["Name"],
  "slots[*].input": ["Input"],
  "slots[*].expects": ["Source expected"],
  "slots[*].mode": ["Output mode"],
  "slots[*].placement.widthPct": ["Width", "%"],
  "slots[*].placement.heightPct": ["Height", "%"],
  "slots[*].placement.offsetPx": ["Horizontal position", "px"],
  "slots[*].placement.offsetLines": ["Vertical position", "lines"],
  "slots[*].syncKind": ["Sync"],
  "slots[*].outputKind": ["Output kind"],
  "slots[*].inputRange": ["Input range"],
  "slots[*].colour.brightnessPct": ["Brightness", "%"],
  "slots[*].colour.contrastPct": ["Contrast", "%"],
  "slots[*].colour.saturationPct": ["Saturation", "%"],
  "slots[*].lineFilter": ["Line filter"],
};

/** `slots[4].placement.offsetPx` → `slots[*].placement.offsetPx`: the pattern that limits and words go by. */
export function pathPattern(path: string): string {
  return path.replace(/\[[^\]]*\]/u, "[*]");
}

/** The words for a document path or native key; an unknown one is its own label. */
export function settingWords(path: string): SettingWords {
  const [label, unit] = WORDS[pathPattern(path)] ?? [path];
  const of = /^(?:slots|modes)\[([^\]]*)\]/u.exec(path)?.[1];
  const reach: Reach = path.startsWith("slots[") ? "slot" : path.startsWith("modes[") ? "mode" : "everywhere";
  return { label, unit, reach, of };
}
