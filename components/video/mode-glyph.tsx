import type { ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";
import { GLYPH, glyphWords, modeGlyph } from "@/components/video/waveform-geometry";

export type ModeGlyphProps = {
  readonly timing: RasterTiming;
  /** Without words where the mode's name stands beside it. */
  readonly decorative?: boolean;
  readonly className?: string;
};

/** Line waveform and field twin of a mode, to scale. */
export function ModeGlyph({ timing, decorative = false, className }: ModeGlyphProps) {
  const glyph = modeGlyph(timing);
  const words = decorative ? { "aria-hidden": true } : { role: "img", "aria-label": glyphWords(timing) };
  return (
    <svg
      {...words}
      width={GLYPH.widthPx}
      height={GLYPH.heightPx}
      viewBox={`0 0 ${GLYPH.widthPx} ${GLYPH.heightPx}`}
      className={classNames("shrink-0 fill-none stroke-signal", className)}
      strokeWidth={1.5}
    >
      <path d={glyph.linePath} />
      {glyph.fieldRows.map((row) => (
        <path
          key={row.yPx}
          d={`M${row.fromPx} ${row.yPx}H${row.toPx}`}
          strokeDasharray={glyph.interlaced ? "4 5" : glyph.isCutShort ? "44 4 3 4" : undefined}
          strokeDashoffset={row.dashOffsetPx}
        />
      ))}
    </svg>
  );
}

export type ModeMarkProps = {
  readonly timing: RasterTiming;
  /** The mode's own name; without it the one made from its raster. */
  readonly name?: ReactNode;
  /** Under the glyph instead of beside it. */
  readonly stacked?: boolean;
  readonly className?: string;
};

/** A mode as it is named everywhere: glyph and name. */
export function ModeMark({ timing, name, stacked = false, className }: ModeMarkProps) {
  return (
    <span className={classNames("inline-flex", stacked ? "flex-col gap-0.5" : "items-center gap-2", className)}>
      <ModeGlyph timing={timing} decorative />
      <span className="figure text-muted">{name ?? modeName(timing)}</span>
    </span>
  );
}
