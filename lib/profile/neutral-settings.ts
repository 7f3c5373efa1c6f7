/** What kind of value a setting holds. `key`: a mode's key; `flag`: true or false. */
export type NeutralKind = "whole" | "number" | "text" | "choice" | "flag" | "key";

/** A value of the profile document that a device can hold, by its path pattern (`[*]` for a slot number or mode key). */
export type NeutralSetting = {
  readonly pattern: string;
  /** As it stands on screen, beside the slot's or mode's name. */
  readonly label: string;
  readonly kind: NeutralKind;
  readonly unit?: string | undefined;
};

const setting = (pattern: string, label: string, kind: NeutralKind, unit?: string): NeutralSetting => ({
  pattern,
  label,
  kind,
  unit,
});

function axisSettings(axis: "horizontal" | "vertical", unit: string): NeutralSetting[] {
  const at = (part: string) => `modes[*].timing.${axis}.${part}`;
  const name = axis === "horizontal" ? "Horizontal" : "Vertical";
  return [
    setting(at("active"), `${name} active`, "whole", unit),
    setting(at("frontPorch"), `${name} front porch`, "whole", unit),
    setting(at("sync"), `${name} sync`, "whole", unit),
    setting(at("backPorch"), `${name} back porch`, "whole", unit),
    setting(at("polarity"), `${name} sync polarity`, "choice"),
  ];
}

/** Every setting of the document, in the document's order. */
export const neutralSettings: readonly NeutralSetting[] = [
  setting("everywhere.trim.leftPx", "Trim left", "whole", "px"),
  setting("everywhere.trim.rightPx", "Trim right", "whole", "px"),
  setting("everywhere.trim.topLines", "Trim top", "whole", "lines"),
  setting("everywhere.trim.bottomLines", "Trim bottom", "whole", "lines"),
  setting("everywhere.powerOnSlot", "Power-on slot", "whole"),
  setting("modes[*].name", "Mode name", "text"),
  setting("modes[*].timing.pixelClockHz", "Pixel clock", "number", "Hz"),
  setting("modes[*].timing.interlaced", "Interlaced", "flag"),
  setting("modes[*].timing.equalFields", "Equal fields", "flag"),
  ...axisSettings("horizontal", "px"),
  ...axisSettings("vertical", "lines"),
  setting("slots[*].name", "Name", "text"),
  setting("slots[*].input", "Input", "choice"),
  setting("slots[*].mode", "Output mode", "key"),
  setting("slots[*].placement.widthPct", "Width", "number", "%"),
  setting("slots[*].placement.heightPct", "Height", "number", "%"),
  setting("slots[*].placement.offsetPx", "Horizontal position", "whole", "px"),
  setting("slots[*].placement.offsetLines", "Vertical position", "whole", "lines"),
  setting("slots[*].syncKind", "Sync", "choice"),
  setting("slots[*].outputKind", "Output", "choice"),
  setting("slots[*].inputRange", "Input range", "choice"),
  setting("slots[*].colour.brightnessPct", "Brightness", "number", "%"),
  setting("slots[*].colour.contrastPct", "Contrast", "number", "%"),
  setting("slots[*].colour.saturationPct", "Saturation", "number", "%"),
  setting("slots[*].lineFilter", "Line filter", "choice"),
];

const byPattern: ReadonlyMap<string, NeutralSetting> = new Map(neutralSettings.map((one) => [one.pattern, one]));

/** The setting of a pattern (`slots[*].placement.widthPct`), or undefined where the document has none. */
export function neutralSetting(pattern: string): NeutralSetting | undefined {
  return byPattern.get(pattern);
}
