const browsers = [
  [/\bEdg\//u, "Edge"],
  [/\bFirefox\//u, "Firefox"],
  [/\bHeadlessChrome\/|\bChrom(?:e|ium)\//u, "Chromium"],
  [/\bSafari\//u, "Safari"],
] as const;

const systems = [
  [/\bAndroid\b/u, "Android"],
  [/\biPhone\b|\biPad\b/u, "iOS"],
  [/\bWindows\b/u, "Windows"],
  [/\bMac OS X\b/u, "macOS"],
  [/\bCrOS\b/u, "ChromeOS"],
  [/\bLinux\b/u, "Linux"],
] as const;

const firstOf = (table: readonly (readonly [RegExp, string])[], text: string) =>
  table.find(([pattern]) => pattern.test(text))?.[1];

/** A session's browser in words: "Firefox on Linux". Enough to tell one's own apart. */
export function browserName(userAgent: string | null): string {
  if (userAgent === null || userAgent === "") return "Unknown browser";
  const browser = firstOf(browsers, userAgent) ?? "Another browser";
  const system = firstOf(systems, userAgent);
  return system === undefined ? browser : `${browser} on ${system}`;
}
