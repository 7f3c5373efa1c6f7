import type { VisiblePct } from "@/lib/timing/envelope";
import { placeExtent, cutOff } from "@/lib/picture/effective-picture";
import type { DocumentPatch, Finding, Remedy } from "@/lib/profile/finding";
import { largestPctInside, type Window } from "@/lib/profile/fit-placement";
import { slotPath } from "@/lib/profile/paths";
import { limitSourceText, listText, percent, withUnit } from "@/lib/profile/words";
import type { CheckContext, JudgedSlot } from "./context";
import { placementAxes, type PlacementAxis } from "./placement";
import { isOutside } from "./shape";

/** Shapes that differ by less look the same. Ours, no source. */
const SAME_SHAPE = 0.01;

function ratioOf(aspect: string): number {
  const [width = 0, height = 0] = aspect.split(":").map(Number);
  return width / height;
}

/** "16:9" → "16 : 9" */
function aspectText(aspect: string): string {
  return aspect.replace(":", " : ");
}

function aspectFindings({ document, screen }: CheckContext): Finding[] {
  const made = document.madeFor?.screen?.aspect;
  const shown = screen?.aspect;
  if (made === undefined || shown === undefined) return [];
  const ratio = ratioOf(made) / ratioOf(shown);
  if (!Number.isFinite(ratio) || ratio <= 0 || Math.abs(ratio - 1) < SAME_SHAPE) return [];
  const stretch = ratio > 1 ? `${ratio.toFixed(2)} × too tall` : `${(1 / ratio).toFixed(2)} × too wide`;
  return [
    {
      rule: "picture.aspect",
      path: "madeFor.screen.aspect",
      severity: "caution",
      measured: made,
      limit: shown,
      sentence: `Made for ${aspectText(made)} and shown on ${aspectText(shown)}: circles are ${stretch}.`,
      limitSource: limitSourceText(screen?.sources?.aspect),
      slots: [],
      remedies: [],
    },
  ];
}

/** What a frame leaves visible on an axis, in px or field lines: only whole ones count as seen. */
function visibleWindow(axis: PlacementAxis, visible: VisiblePct): Window {
  const [before, after] = axis.axis === "horizontal" ? [visible.left, visible.right] : [visible.top, visible.bottom];
  return {
    from: Math.ceil((axis.active * before) / 100 - 1e-9),
    to: axis.active - Math.ceil((axis.active * after) / 100 - 1e-9),
  };
}

type Hidden = { readonly axis: PlacementAxis; readonly window: Window; readonly hidden: number; readonly size: number };

function hiddenOn(axis: PlacementAxis, visible: VisiblePct): Hidden {
  const window = visibleWindow(axis, visible);
  const extent = placeExtent(axis.active, axis.sizePct ?? 100, axis.offset ?? 0);
  const cut = cutOff(axis.active, extent);
  const [first, last] = [extent.first + cut.before, extent.first + extent.size - cut.after];
  const hidden = Math.max(0, Math.min(last, window.from) - first) + Math.max(0, last - Math.max(first, window.to));
  return { axis, window, hidden, size: last - first };
}

/** Sizes that lie inside what is visible, at the offsets as they are; none where one axis has no such size. */
function shrink(number: number, hidden: readonly Hidden[], context: CheckContext): Remedy[] {
  const patch = hidden.flatMap(({ axis, window }): DocumentPatch[] => {
    const limit = context.device?.numbers[`slots[*].placement.${axis.sizeField}`];
    const pct = largestPctInside(axis.active, axis.offset ?? 0, window, limit);
    return pct === null ? [] : [{ path: slotPath(number, `placement.${axis.sizeField}`), value: pct }];
  });
  if (patch.length < hidden.length) return [];
  return [{ kind: "set", label: `Use ${listText(patch.map(({ value }) => percent(Number(value))))}`, patch }];
}

function hiddenFindings(context: CheckContext, slot: JudgedSlot): Finding[] {
  const { screen } = context;
  const { timing, number } = slot;
  const placement = slot.slot.placement;
  if (!screen?.visiblePct || !timing || !placement || isOutside(slot)) return [];
  const visible = screen.visiblePct;
  const hidden = placementAxes(timing, placement)
    .filter(({ sizePct }) => sizePct !== undefined)
    .map((axis) => hiddenOn(axis, visible))
    .filter((one) => one.hidden > 0);
  if (hidden.length === 0) return [];
  const text = ({ axis, hidden: count, size }: Hidden) => {
    const fields = axis.axis === "vertical" && timing.interlaced ? 2 : 1;
    return `${count * fields} of ${withUnit(size * fields, axis.axis === "vertical" ? "lines" : "px")}`;
  };
  const verb = hidden.length === 1 && hidden[0]?.hidden === 1 ? "lies" : "lie";
  return [
    {
      rule: "picture.hidden",
      path: slotPath(number, "placement"),
      severity: "caution",
      measured: hidden[0]?.hidden,
      limit: 0,
      unit: hidden[0]?.axis.unit,
      sentence: `${listText(hidden.map(text))} of slot ${number}'s picture ${verb} behind this screen's frame.`,
      limitSource: limitSourceText(screen.sources?.visiblePct),
      slots: [number],
      remedies: shrink(number, hidden, context),
    },
  ];
}

/** `picture`: shapes that are stretched, and lines and px that the screen's frame hides. */
export function pictureFindings(context: CheckContext): Finding[] {
  return [...aspectFindings(context), ...context.slots.flatMap((slot) => hiddenFindings(context, slot))];
}
