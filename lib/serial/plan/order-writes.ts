import type { AllowedRasters } from "./allowed-rasters";
import { applyWrites, outputOf, type BareStep, type DeviceImage } from "./device-image";
import { pictureFits, slotsTouched } from "./picture-fits";
import { sameOutput } from "./output-raster";
import { movesToTry, type Move } from "./split-porches";
import type { WriteUnit } from "./write-units";

/**
 * States that one search looks at, at most. Only writes that change what is out branch: twelve numbers of one raster
 * and the slot's mode make 2¹³ sets of writes, each looked at once.
 */
export const MAX_SEARCH_STATES = 20_000;

export type OrderRules = {
  readonly allowed: AllowedRasters;
  /** Slots whose picture must stay inside its raster, since the device refuses others; empty on devices that cut. */
  readonly keepInside: ReadonlySet<number>;
};

type Search = {
  readonly image: DeviceImage;
  readonly rules: OrderRules;
  readonly seen: Set<string>;
  readonly order: WriteUnit[];
};

function isAccepted({ image, rules }: Search, unit: WriteUnit): boolean {
  if (rules.keepInside.size === 0) return true;
  return slotsTouched(image.driver, image.values, unit).every(
    (slot) => !rules.keepInside.has(slot) || pictureFits(image.driver, image.values, slot),
  );
}

function undoTo(search: Search, length: number): void {
  while (search.order.length > length) {
    const unit = search.order.pop();
    if (unit) applyWrites(search.image, unit.was);
  }
}

/** Takes a move if every raster on its way is allowed and the device takes every write; else leaves all as it was. */
function take(search: Search, move: Move, mustStay: boolean): boolean {
  const length = search.order.length;
  for (const unit of move.units) {
    const before = outputOf(search.image);
    applyWrites(search.image, unit.writes);
    search.order.push(unit);
    const after = outputOf(search.image);
    const fine = mustStay ? sameOutput(before, after) : search.rules.allowed(after);
    if (fine && isAccepted(search, unit)) continue;
    undoTo(search, length);
    return false;
  }
  return true;
}

/** Every write that changes nothing on the screen goes as soon as the device takes it: it can bar no other's way. */
function takeUnseen(search: Search, pending: readonly Move[]): readonly Move[] {
  let left = pending;
  for (;;) {
    const still = left.filter((move) => !take(search, move, true));
    if (still.length === left.length) return left;
    left = still;
  }
}

function find(search: Search, pending: readonly Move[]): boolean {
  const length = search.order.length;
  const left = takeUnseen(search, pending);
  if (left.length === 0) return true;
  const state = left.map((move) => move.units[0]?.writes[0]?.key).join(" ");
  if (search.seen.has(state) || search.seen.size >= MAX_SEARCH_STATES) {
    undoTo(search, length);
    return false;
  }
  search.seen.add(state);
  for (const move of left) {
    const before = search.order.length;
    if (!take(search, move, false)) continue;
    if (find(search, left.filter((other) => other !== move))) return true;
    undoTo(search, before);
  }
  undoTo(search, length);
  return false;
}

function attempt(image: DeviceImage, moves: readonly Move[], rules: OrderRules): readonly WriteUnit[] | null {
  const raster = image.raster;
  const search: Search = { image, rules, seen: new Set(), order: [] };
  const found = find(search, moves);
  const order = [...search.order];
  undoTo(search, 0);
  image.raster = raster;
  return found ? order : null;
}

/**
 * An order of writes in which every raster that is out between is allowed and the device takes every one.
 *
 * Each setting is written once; where no such order exists, porches whose sum stays are brought over in pieces.
 * @param image the device before the first write; left as it was
 * @returns the writes in order, or null where there is none
 */
export function orderWrites(image: DeviceImage, units: readonly WriteUnit[], rules: OrderRules): readonly BareStep[] | null {
  for (const moves of movesToTry(image, units)) {
    const order = attempt(image, moves, rules);
    if (order) return order.map((unit) => ({ kind: "write", ...unit }));
  }
  return null;
}
