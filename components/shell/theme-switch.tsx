"use client";

import { themeCookie, themeInForce } from "@/components/shell/theme";

/** Names the theme in force and changes to the other. The style sheet picks the word, so it is right before scripts run. */
export function ThemeSwitch() {
  const change = () => {
    const root = document.documentElement;
    const systemIsDark = window.matchMedia("(prefers-color-scheme: dark)").matches;
    const next = themeInForce(root.dataset.theme, systemIsDark) === "night" ? "day" : "night";
    root.dataset.theme = next;
    document.cookie = themeCookie(next);
  };
  return (
    <button
      type="button"
      onClick={change}
      className="min-h-9 rounded-control px-2 font-[500] text-muted hover:text-text"
    >
      <span className="when-day">
        Day <span className="sr-only">theme, change to night</span>
      </span>
      <span className="when-night">
        Night <span className="sr-only">theme, change to day</span>
      </span>
    </button>
  );
}
