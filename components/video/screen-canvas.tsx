"use client";

import { useEffect, useRef } from "react";
import { paintScreen } from "@/lib/picture/paint-screen";
import type { SimulatedScreen } from "@/lib/picture/simulated-screen";

/** Draws a simulated screen inside its cabinet. `label` says what is to be seen, for those who don't see it. */
export function ScreenCanvas({ screen, label }: { readonly screen: SimulatedScreen; readonly label: string }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const context = canvas.current?.getContext("2d");
    if (context) paintScreen(context, screen);
  }, [screen]);
  return (
    <div className="rounded-set bg-cabinet p-2.5 md:p-3.5">
      <canvas
        ref={canvas}
        role="img"
        aria-label={label}
        width={screen.widthPx}
        height={screen.heightPx}
        className="block h-auto w-full bg-glass [border-radius:24px/18px]"
      />
    </div>
  );
}
