import type { Config } from "tailwindcss";
import plugin from "tailwindcss/plugin";

/** The colours of both themes. A component names a token, never a colour. */
const tokens = {
  bg: { day: "#E7ECE7", night: "#161A17" },
  surface: { day: "#F8FAF7", night: "#1E231F" },
  sunk: { day: "#D9E0D8", night: "#101311" },
  line: { day: "#BEC8BD", night: "#343B35" },
  edge: { day: "#7C897B", night: "#78837A" },
  text: { day: "#191E19", night: "#EAE8DC" },
  muted: { day: "#525D52", night: "#A0A99F" },
  lamp: { day: "#A04100", night: "#FF9A4D" },
  "on-lamp": { day: "#FFF7EF", night: "#251100" },
  // The light itself, in the wordmark alone: never text, never the only sign of a state.
  glow: { day: "#FF9A4D", night: "#FFB27A" },
  signal: { day: "#4A37B0", night: "#B3A3FF" },
  halt: { day: "#A3162A", night: "#FF7088" },
  ok: { day: "#1F6A3B", night: "#8FD6A0" },
  tape: { day: "#F6E5A9", night: "#D9C98F" },
  "tape-ink": { day: "#2A2416", night: "#221D0F" },
  // The cabinet and the glass of a drawn CRT are dark by day too.
  cabinet: { day: "#0B0D0B", night: "#000000" },
  glass: { day: "#14131F", night: "#14131F" },
} as const;

type Theme = "day" | "night";

const variables = (theme: Theme) => ({
  ...Object.fromEntries(Object.entries(tokens).map(([name, value]) => [`--${name}`, value[theme]])),
  "color-scheme": theme === "day" ? "light" : "dark",
});

const config: Config = {
  content: ["./app/**/*.{ts,tsx}", "./components/**/*.{ts,tsx}"],
  theme: {
    colors: {
      transparent: "transparent",
      current: "currentColor",
      ...Object.fromEntries(Object.keys(tokens).map((name) => [name, `var(--${name})`])),
    },
    fontFamily: {
      heading: ["var(--font-heading)", "sans-serif"],
      sans: ["var(--font-text)", "sans-serif"],
      mono: ["var(--font-mono)", "monospace"],
    },
    fontSize: {
      xs: ["12.5px", "1.4"],
      sm: ["13.5px", "1.45"],
      base: ["14.5px", "1.45"],
      lg: ["16px", "1.45"],
      xl: ["19px", "1.3"],
      "2xl": ["22px", "1.25"],
      "3xl": ["30px", "1.15"],
      "4xl": ["38px", "1.1"],
      "5xl": ["50px", "1.04"],
    },
    borderRadius: { none: "0", control: "7px", set: "16px", full: "9999px" },
    screens: { sm: "480px", md: "760px", lg: "1040px", xl: "1320px" },
    extend: {
      fontWeight: { strong: "600", button: "550" },
      transitionDuration: { move: "150ms" },
    },
  },
  plugins: [
    plugin(({ addBase }) => {
      addBase({
        ":root": variables("day"),
        // Night follows the system unless the switch says day, and the switch wins both ways.
        "@media (prefers-color-scheme: dark)": { ':root:not([data-theme="day"])': variables("night") },
        ':root[data-theme="night"]': variables("night"),
      });
    }),
  ],
};

export default config;
