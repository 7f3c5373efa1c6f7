import { describe, expect, it } from "vitest";
import { readTheme, themeCookie, themeInForce } from "@/components/shell/theme";
import config from "@/tailwind.config";

type Rules = Readonly<Record<string, Readonly<Record<string, string>>>>;

/** The variables of both themes, as the plugin puts them into the style sheet. */
function themes(): {
  readonly day: Readonly<Record<string, string>>;
  readonly night: Readonly<Record<string, string>>;
} {
  let rules: Rules = {};
  for (const entry of config.plugins ?? []) {
    if (typeof entry === "object" && "handler" in entry) {
      // Only addBase is called by the plugin of the tokens.
      entry.handler({ addBase: (base: Rules) => (rules = base) } as unknown as Parameters<typeof entry.handler>[0]);
    }
  }
  return { day: rules[":root"] ?? {}, night: rules[':root[data-theme="night"]'] ?? {} };
}

/** Source: WCAG 2.2, definitions of relative luminance and contrast ratio. */
function luminance(hex: string): number {
  const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
    const channel = parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

function contrast(a: string, b: string): number {
  const [low = 0, high = 0] = [luminance(a), luminance(b)].sort((x, y) => x - y);
  return (high + 0.05) / (low + 0.05);
}

describe("colours of both themes", () => {
  const { day, night } = themes();
  const texts = ["text", "muted", "lamp", "signal", "halt", "ok"].flatMap((ink) =>
    ["bg", "surface"].map((ground) => [ink, ground] as const),
  );

  // WCAG 2.2, 1.4.3: 4.5 : 1 for text; 1.4.11: 3 : 1 for borders of controls.
  it.each([
    ...texts,
    ["text", "sunk"],
    ["muted", "sunk"],
    ["on-lamp", "lamp"],
    ["tape-ink", "tape"],
    ["bg", "text"],
  ] as const)("%s on %s can be read", (ink, ground) => {
    for (const theme of [day, night])
      expect(contrast(theme[`--${ink}`] ?? "", theme[`--${ground}`] ?? "")).toBeGreaterThanOrEqual(4.5);
  });

  it.each([
    ["edge", "bg"],
    ["edge", "surface"],
  ] as const)("%s on %s can be seen", (ink, ground) => {
    for (const theme of [day, night])
      expect(contrast(theme[`--${ink}`] ?? "", theme[`--${ground}`] ?? "")).toBeGreaterThanOrEqual(3);
  });
});

describe("choice of theme", () => {
  it("lets the switch win over the system, both ways", () => {
    expect(themeInForce("day", true)).toBe("day");
    expect(themeInForce("night", false)).toBe("night");
    expect(themeInForce(undefined, true)).toBe("night");
  });

  it("takes nothing else from a cookie, and writes what it reads", () => {
    expect(readTheme('dusk" onload=')).toBeUndefined();
    expect(readTheme(/theme=(\w+)/u.exec(themeCookie("night"))?.[1])).toBe("night");
  });
});
