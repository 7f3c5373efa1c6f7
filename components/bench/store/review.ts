import { overlay } from "@/lib/profile/overlay";
import { patchTarget } from "@/lib/profile/patch-target";
import { applyPatch } from "@/lib/profile/paths";
import { planChanges } from "@/lib/serial/plan/plan-changes";
import { planEdits } from "@/lib/serial/plan/plan-edits";
import { COUNTDOWN_SECONDS } from "@/lib/serial/run/create-run";
import type { Planned } from "@/lib/serial/plan/types";
import type { DocumentPatch, Remedy } from "@/lib/profile/finding";
import type { NativeWrite } from "@/lib/serial/native";
import { readBefore, rememberRead } from "@/components/bench/store/read-before";
import type { BenchCore } from "@/components/bench/store/bench-core";
import type { BenchReview, BenchTarget } from "@/components/bench/store/types";

type Choices = Pick<BenchReview, "target" | "leftOut" | "acknowledged" | "countdownSeconds">;

/** The plan of what is under review, made from what was read last. Null while nothing was read. */
export function planFor(core: BenchCore, { target, leftOut, acknowledged }: Choices): Planned | null {
  const { reading, screen } = core.store.getState();
  if (!core.line || !reading) return null;
  const input = {
    backup: reading.content, driver: core.line.driver.definition, screen: screen.kind === "known" ? screen.envelope : ("accepted-unknown" as const),
    source: reading.arriving?.format ?? null, activeSlot: reading.activeSlot, rasterOut: reading.rasterOut, acknowledged,
  };
  switch (target.kind) {
    case "edits": return planEdits({ ...input, edits: target.patches, nativeEdits: target.native });
    case "profile": return planChanges({ ...input, leftOut, target: { kind: "profile", document: applyPatch(target.document, target.patches) } });
    case "restore": return planChanges({ ...input, leftOut, target: { kind: "restore", content: target.content } });
  }
}

/** Plans again after anything that a plan rests on moved: reading, screen, choices. */
export function replan(core: BenchCore, change: Partial<Choices> = {}): void {
  const { review } = core.store.getState();
  if (!review) return;
  const choices: Choices = { ...review, ...change };
  const next = planFor(core, choices);
  if (next) core.store.setState({ review: { ...choices, planned: next } });
}

export function openReview(core: BenchCore, target: BenchTarget): void {
  const choices: Choices = { target, leftOut: [], acknowledged: knownBefore(core), countdownSeconds: COUNTDOWN_SECONDS.default };
  const next = planFor(core, choices);
  if (next) core.store.setState({ review: { ...choices, planned: next }, notice: null });
}

export function leaveOut(core: BenchCore, slot: number, isOut: boolean): void {
  const { review } = core.store.getState();
  if (!review) return;
  const others = review.leftOut.filter((number) => number !== slot);
  replan(core, { leftOut: isOut ? [...others, slot].sort((a, b) => a - b) : others });
}

/** What the owner read of one screen; unknown limits are acknowledged once a screen, in this browser. */
function knownBefore(core: BenchCore): readonly string[] {
  const { screen } = core.store.getState();
  return screen.kind === "known" ? readBefore(core.around.storage, screen) : [];
}

export function acknowledge(core: BenchCore, keys: readonly string[], isRead: boolean): void {
  const { review, screen } = core.store.getState();
  if (!review) return;
  const others = review.acknowledged.filter((one) => !keys.includes(one));
  if (screen.kind === "known") rememberRead(core.around.storage, screen, keys, isRead);
  replan(core, { acknowledged: isRead ? [...others, ...keys].sort() : others });
}

/** How long the trial will wait: no part of the plan, so nothing is planned again. */
export function setCountdown(core: BenchCore, countdownSeconds: number): void {
  core.store.setState((state) => ({ review: state.review && { ...state.review, countdownSeconds } }));
}

/** One click of a remedy: values are set in the target, a slot is left out. */
export function takeRemedy(core: BenchCore, remedy: Remedy): void {
  const { review, reading, device } = core.store.getState();
  if (!review || !reading || !device) return;
  if (remedy.kind === "leave-out") return leaveOut(core, remedy.slot, true);
  const { target } = review;
  if (target.kind === "restore") return;
  if (target.kind === "edits") return replan(core, { target: { ...target, patches: [...target.patches, ...remedy.patch] } });
  const base = reading.content.document;
  const profile = applyPatch(target.document, target.patches);
  const { merged, modeMap } = overlay({ base, profile, leftOut: review.leftOut, limits: device.limits });
  const patched = patchTarget(profile, merged, modeMap, remedy.patch);
  const next: BenchTarget = patched.added.length > 0
    ? { ...target, document: patched.document, patches: [], isAltered: true }
    : { ...target, patches: [...target.patches, ...patched.patches] };
  replan(core, { target: next });
}

/** A value moved on a ruler: it replaces an earlier one of the same path, and goes when it is as read. */
export function withEdit(edits: readonly DocumentPatch[], patch: DocumentPatch, isAsRead: boolean): readonly DocumentPatch[] {
  const others = edits.filter((one) => one.path !== patch.path);
  return isAsRead ? others : [...others, patch];
}

/** The same for a native setting. */
export function withNativeEdit(edits: readonly NativeWrite[], edit: NativeWrite, isAsRead: boolean): readonly NativeWrite[] {
  const others = edits.filter((one) => one.key !== edit.key);
  return isAsRead ? others : [...others, edit];
}
