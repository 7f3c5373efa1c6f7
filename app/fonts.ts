import localFont from "next/font/local";

/** Headings and tape. */
export const headingFont = localFont({
  src: "../node_modules/@fontsource-variable/familjen-grotesk/files/familjen-grotesk-latin-wght-normal.woff2",
  weight: "400 700",
  variable: "--font-heading",
  display: "swap",
});

/** Running text. */
export const textFont = localFont({
  src: "../node_modules/@fontsource-variable/hanken-grotesk/files/hanken-grotesk-latin-wght-normal.woff2",
  weight: "100 900",
  variable: "--font-text",
  display: "swap",
});

/** Figures and the wire; set at 78 % width, so the width axis is declared. */
export const monoFont = localFont({
  src: "../node_modules/@fontsource-variable/martian-mono/files/martian-mono-latin-wdth-normal.woff2",
  weight: "100 800",
  variable: "--font-mono",
  display: "swap",
  declarations: [{ prop: "font-stretch", value: "75% 112.5%" }],
});
