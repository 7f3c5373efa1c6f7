import type { Metadata, Viewport } from "next";
import { cookies, headers } from "next/headers";
import type { ReactNode } from "react";
import { headingFont, monoFont, textFont } from "@/app/fonts";
import { BenchProvider } from "@/components/bench/bench-provider";
import { Providers } from "@/components/shell/providers";
import { readTheme, THEME_COOKIE } from "@/components/shell/theme";
import { getSessionUser } from "@/lib/server/session";
import "./globals.css";

export const metadata: Metadata = {
  title: { default: "Backporch", template: "%s · Backporch" },
  description: "A console for video scalers with a serial port: backups, checked profiles, a trial with a way back.",
};

export const viewport: Viewport = {
  themeColor: [
    { media: "(prefers-color-scheme: light)", color: "#E7ECE7" },
    { media: "(prefers-color-scheme: dark)", color: "#161A17" },
  ],
};

export default async function RootLayout({ children }: { readonly children: ReactNode }) {
  // Reading the nonce makes every page dynamic, which the nonce policy needs: a static page has none.
  const nonce = (await headers()).get("x-nonce") ?? undefined;
  // The cookie gives the theme with the first byte, so nothing flashes.
  const theme = readTheme((await cookies()).get(THEME_COOKIE)?.value);
  // The link outlives a page: its bench stands above all of them.
  const user = await getSessionUser();
  return (
    <html
      lang="en-GB"
      data-theme={theme}
      // The switch changes the attribute before React wakes up.
      suppressHydrationWarning
      className={`${headingFont.variable} ${textFont.variable} ${monoFont.variable}`}
    >
      <body>
        <Providers nonce={nonce}>
          <BenchProvider account={user === null ? null : { id: user.id, name: user.name, role: user.role }}>
            {children}
          </BenchProvider>
        </Providers>
      </body>
    </html>
  );
}
