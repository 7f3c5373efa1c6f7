import { formatClock, formatFieldRate, formatFigure, formatLineRate, formatNumber } from "@/components/ui/figures";
import { syncKindWords } from "@/components/screens/limit-words";
import { ModeGlyph, ModeMark } from "@/components/video/mode-glyph";
import { Tape } from "@/components/video/tape";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "@/lib/profile/document";
import { modeName } from "@/lib/timing/mode-name";
import type { RasterTiming } from "@/lib/timing/raster";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import { rasterProblems } from "@/lib/timing/raster-problems";

/** A timing that can be drawn; a document from elsewhere may name one that is no raster. */
export function drawable(timing: RasterTiming | undefined): RasterTiming | undefined {
  return timing === undefined || rasterProblems(timing).length > 0 ? undefined : timing;
}

const head = "py-1.5 pr-4 text-left text-sm font-[500] text-muted whitespace-nowrap";
const cell = "py-2 pr-4 align-middle";

/** Placement in short: "12 px, −3 lines, 96.0 % × 97.6 %"; what is not named is left out. */
export function placementWords(placement: ProfileSlot["placement"]): string {
  if (placement === undefined) return "";
  const { offsetPx, offsetLines, widthPct, heightPct } = placement;
  const size = [widthPct, heightPct]
    .filter((part) => part !== undefined)
    .map((part) => formatFigure(part, "%", { decimals: 1 }));
  const offset = [
    ...(offsetPx === undefined ? [] : [formatFigure(offsetPx, "px")]),
    ...(offsetLines === undefined ? [] : [formatFigure(offsetLines, Math.abs(offsetLines) === 1 ? "line" : "lines")]),
  ];
  return [...(size.length === 0 ? [] : [size.join(" × ")]), ...offset].join(", ");
}

/** "1280 × 720, progressive, 60 Hz" */
export function sourceWords(expects: ProfileSlot["expects"]): string {
  if (expects === undefined) return "";
  const { activePx, activeLines, interlaced, fieldRateHz: rate } = expects;
  return `${formatNumber(activePx)} × ${formatNumber(activeLines)}, ${interlaced ? "interlaced" : "progressive"}, ${formatFigure(rate, "Hz", { decimalsAtMost: 2 })}`;
}

/** Slots of a document on tape, with what each names. */
export function SlotTable({
  document,
  activeSlot,
}: {
  readonly document: ProfileDocument;
  readonly activeSlot?: number;
}) {
  const slots = document.slots ?? [];
  const modes = new Map((document.modes ?? []).map((mode) => [mode.key, mode]));
  if (slots.length === 0) return <p className="text-muted">It names no slots.</p>;
  return (
    <ul className="border-t border-line">
      {slots.map((slot) => (
        <SlotRow
          key={slot.number}
          slot={slot}
          mode={slot.mode === undefined ? undefined : modes.get(slot.mode)}
          isActive={slot.number === activeSlot}
        />
      ))}
    </ul>
  );
}

function SlotRow({
  slot,
  mode,
  isActive,
}: {
  readonly slot: ProfileSlot;
  readonly mode: ProfileMode | undefined;
  readonly isActive: boolean;
}) {
  const timing = drawable(mode?.timing);
  const details = [
    sourceWords(slot.expects),
    placementWords(slot.placement),
    slot.input === undefined ? "" : `from ${slot.input}`,
    slot.syncKind === undefined ? "" : `${syncKindWords[slot.syncKind]} sync`,
    slot.outputKind ?? "",
  ].filter((part) => part !== "");
  const isEmpty = mode === undefined && slot.mode === undefined && details.length === 0;
  return (
    <li
      className={`grid items-center gap-x-4 gap-y-1 border-b border-line py-2 sm:grid-cols-[28px_minmax(0,200px)_200px_minmax(0,1fr)] ${isActive ? "bg-surface shadow-[inset_3px_0_0_var(--lamp)]" : ""}`}
    >
      <span className={`figure pl-2 ${isActive ? "text-lamp" : "text-muted"}`}>
        {slot.number}
        {isActive ? <span className="sr-only">, active</span> : null}
      </span>
      <Tape name={slot.name ?? (isEmpty ? null : `Slot ${slot.number}`)} className="w-full" />
      {timing === undefined ? (
        <span className="figure text-muted">{slot.mode === undefined ? "" : `mode ${slot.mode}`}</span>
      ) : (
        <ModeMark timing={timing} />
      )}
      <span className="figure text-muted">{details.join("  ")}</span>
    </li>
  );
}

/** Modes of a document with their rasters. */
export function ModeTable({ document }: { readonly document: ProfileDocument }) {
  const modes = (document.modes ?? []).filter((mode) => drawable(mode.timing) !== undefined);
  if (modes.length === 0) return <p className="text-muted">It names no modes.</p>;
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Modes">
      <table className="w-full min-w-[640px] border-collapse">
        <caption className="sr-only">Modes with their rasters</caption>
        <thead>
          <tr className="border-b border-line">
            <th scope="col" className={head}>
              Mode
            </th>
            <th scope="col" className={head}>
              Raster
            </th>
            <th scope="col" className={head}>
              Line rate
            </th>
            <th scope="col" className={head}>
              Field rate
            </th>
            <th scope="col" className={head}>
              Clock
            </th>
            <th scope="col" className={head}>
              Across, clocks
            </th>
            <th scope="col" className={head}>
              Down, lines
            </th>
          </tr>
        </thead>
        <tbody>
          {modes.map((mode) => (
            <ModeRow key={mode.key} mode={mode} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

function ModeRow({ mode }: { readonly mode: ProfileMode }) {
  const timing = drawable(mode.timing);
  if (timing === undefined) return null;
  const axis = ({ active, frontPorch, sync, backPorch }: RasterTiming["horizontal"]) =>
    [active, frontPorch, sync, backPorch].map((part) => formatNumber(part)).join(" + ");
  return (
    <tr className="border-b border-line">
      <th scope="row" className={`${cell} text-left font-strong`}>
        {mode.name ?? mode.key}
      </th>
      <td className={cell}>
        <span className="flex items-center gap-2">
          <ModeGlyph timing={timing} decorative />
          <span className="figure">{modeName(timing)}</span>
        </span>
      </td>
      <td className={`${cell} figure`}>{formatLineRate(lineRateHz(timing))}</td>
      <td className={`${cell} figure`}>{formatFieldRate(fieldRateHz(timing))}</td>
      <td className={`${cell} figure`}>{formatClock(timing.pixelClockHz)}</td>
      <td className={`${cell} figure text-muted`}>{axis(timing.horizontal)}</td>
      <td className={`${cell} figure text-muted`}>{axis(timing.vertical)}</td>
    </tr>
  );
}
