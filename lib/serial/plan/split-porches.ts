import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { DeviceImage } from "./device-image";
import { modeOfSlot } from "./output-raster";
import type { WriteUnit } from "./write-units";

/** One move of an order: its units follow each other with nothing between. */
export type Move = { readonly units: readonly WriteUnit[] };

/** Pieces that one axis is brought over in, at most: a porch is never longer than a few hundred clocks. */
const MAX_PIECES = 256;

/** A whole number that changes on one axis of the raster that is out. */
type Part = { readonly unit: WriteUnit; readonly key: string; readonly was: number; readonly change: number; readonly step: number };

function partOf(driver: CompiledDriver, unit: WriteUnit): Part | null {
  const [write, ...others] = unit.writes;
  const was = unit.was[0]?.value;
  if (write === undefined || others.length > 0 || typeof write.value !== "number" || typeof was !== "number") return null;
  const value = driver.byKey.get(write.key)?.value;
  if (value?.type !== "integer" || value.scale !== 1) return null;
  return { unit, key: write.key, was, change: write.value - was, step: value.step };
}

/** The numbers of an axis that change while their sum stays: a porch step, or a picture made wider between them. */
function movedAxis(image: DeviceImage, units: readonly WriteUnit[], axis: "horizontal" | "vertical"): readonly Part[] {
  const mode = modeOfSlot(image.driver, image.values, image.activeSlot);
  const path = new RegExp(`^modes\\[${mode}\\]\\.timing\\.${axis}\\.(?:active|frontPorch|sync|backPorch)$`, "u");
  const parts = units.flatMap((unit) => {
    const part = unit.writes.some(({ key }) => path.test(key)) ? partOf(image.driver, unit) : null;
    return part ? [part] : [];
  });
  const sum = parts.reduce((total, part) => total + part.change, 0);
  return parts.length > 1 && sum === 0 ? parts : [];
}

/** Where a part stands after `piece` of `pieces`, on its own steps. */
function standAt(part: Part, piece: number, pieces: number): number {
  return part.was + part.step * Math.trunc((part.change * piece) / pieces / part.step);
}

/** Whether the sum of the axis is kept after this piece: rounding can part three numbers, never two. */
function keepsSum(parts: readonly Part[], piece: number, pieces: number): boolean {
  return parts.reduce((sum, part) => sum + standAt(part, piece, pieces) - part.was, 0) === 0;
}

/** The axis brought over in pieces, in each of them the shrinking numbers first, or the growing ones. */
function inPieces(parts: readonly Part[], pieces: number, first: "shrinking" | "growing"): Move {
  const sign = first === "shrinking" ? 1 : -1;
  const ordered = [...parts].sort((a, b) => sign * (a.change - b.change));
  const cuts = Array.from({ length: pieces }, (_, at) => at + 1).filter((cut) => keepsSum(parts, cut, pieces));
  let from = 0;
  const units = cuts.flatMap((cut) => {
    const start = from;
    from = cut;
    return ordered.flatMap((part): WriteUnit[] => {
      const [was, value] = [standAt(part, start, pieces), standAt(part, cut, pieces)];
      if (was === value) return [];
      return [{ writes: [{ key: part.key, value }], was: [{ key: part.key, value: was }] }];
    });
  });
  return { units };
}

function variants(parts: readonly Part[], pieces: number): readonly (Move | null)[] {
  if (parts.length === 0) return [null];
  return [inPieces(parts, pieces, "shrinking"), inPieces(parts, pieces, "growing"), ...(pieces === 1 ? [] : [null])];
}

/** Doubling finds a number of pieces that is enough; a few more than needed do no harm. */
function* pieceCounts(most: number): Generator<number> {
  for (let pieces = 2; pieces < most; pieces *= 2) yield pieces;
  if (most > 1) yield most;
}

/**
 * The moves to try: each porch step as one unit, then every number by itself, then the porch steps in 2, 4, 8 … pieces.
 *
 * @param units every write of the change; those of a porch step are replaced by its pieces
 */
export function* movesToTry(image: DeviceImage, units: readonly WriteUnit[]): Generator<readonly Move[]> {
  const across = movedAxis(image, units, "horizontal");
  const down = movedAxis(image, units, "vertical");
  const single = (unit: WriteUnit): Move => ({ units: [unit] });
  function* split(pieces: number): Generator<readonly Move[]> {
    for (const h of variants(across, pieces)) {
      for (const v of variants(down, pieces)) {
        const gone = new Set([...(h ? across : []), ...(v ? down : [])].map(({ unit }) => unit));
        if (gone.size === 0) continue;
        const rest = units.filter((unit) => !gone.has(unit)).map(single);
        yield [...rest, ...[h, v].filter((move): move is Move => move !== null)];
      }
    }
  }
  yield* split(1);
  yield units.map(single);
  const longest = Math.max(1, ...[...across, ...down].map(({ change }) => Math.abs(change)));
  for (const pieces of pieceCounts(Math.min(longest, MAX_PIECES))) yield* split(pieces);
}
