import { inks } from "./patterns";
import type { SimulatedScreen } from "./simulated-screen";

/** The little of a canvas' 2D context that painting needs. */
export type PaintContext = {
  fillStyle: string | CanvasGradient | CanvasPattern;
  fillRect(x: number, y: number, width: number, height: number): void;
};

const GROUND = "#000000";
/** Over what the frame hides: dark enough to read as hidden, and the picture still shows through. */
const HIDDEN_SHADE = "rgba(0, 0, 0, 0.6)";

/** Paints a simulated screen on a canvas of its `widthPx` by `heightPx`. */
export function paintScreen(context: PaintContext, screen: SimulatedScreen): void {
  context.fillStyle = GROUND;
  context.fillRect(0, 0, screen.widthPx, screen.heightPx);
  for (const { topPx, heightPx, runs } of screen.rows) {
    for (const { leftPx, widthPx, ink } of runs) {
      context.fillStyle = inks[ink] ?? GROUND;
      context.fillRect(leftPx, topPx, widthPx, heightPx);
    }
  }
  context.fillStyle = HIDDEN_SHADE;
  for (const { leftPx, topPx, widthPx, heightPx } of screen.hidden) context.fillRect(leftPx, topPx, widthPx, heightPx);
}
