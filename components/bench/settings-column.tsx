"use client";

import { Button } from "@/components/ui/button";
import { SelectField } from "@/components/ui/field";
import { Segmented } from "@/components/ui/segmented";
import { RangeRuler } from "@/components/video/range-ruler";
import { formatCount } from "@/components/ui/figures";
import { applyPatch, getValue } from "@/lib/profile/paths";
import { safeStretch } from "@/lib/profile/safe-stretch";
import { nativeFromShown, nativeRows, shownRange, shownValue, type NativeRow } from "@/components/bench/native-rows";
import { alsoMoved, type Reach } from "@/lib/profile/also-moved";
import { settingRows, type SettingRow } from "@/components/bench/setting-rows";
import { useBench, useBenchActions, useSettled } from "@/components/bench/bench-provider";
import type { NativeValue } from "@/lib/serial/native";
import { formatSetting } from "@/components/bench/format-value";

const REACHES = [
  { value: "everywhere", label: "Everywhere" },
  { value: "mode", label: "This mode" },
  { value: "slot", label: "This slot" },
] as const;

function reachWords(reach: Reach, slot: number, others: readonly number[]): string {
  if (reach === "slot") return `Moves slot ${slot} alone.`;
  const list = others.length === 0 ? "no other slot" : `slots ${others.join(", ")} too`;
  return reach === "mode" ? `Moves every slot with this mode: ${list}.` : `Moves every slot: ${list}.`;
}

/** Settings by what they act on, each on its range ruler. Changes gather until they are reviewed as a plan. */
export function SettingsColumn({ slot, reach, onReach }: { readonly slot: number; readonly reach: Reach; readonly onReach: (reach: Reach) => void }) {
  const device = useBench((state) => state.device);
  const reading = useBench((state) => state.reading);
  const edits = useBench((state) => state.edits);
  const nativeEdits = useBench((state) => state.nativeEdits);
  const screen = useBench((state) => state.screen);
  // While values are tried, the grey pin shows where each was in the backup before them.
  const before = useBench((state) => (state.activity === "running" ? (state.backup?.content ?? null) : null));
  const { edit, editNative, clearEdits, reviewEdits } = useBenchActions();
  const isFree = useSettled();
  if (!device || !reading) return null;
  const now = reading.content.document;
  const planned = applyPatch(now, edits);
  const rows = settingRows(reach, now, planned, device.limits, slot);
  const modeKey = planned.slots?.find((one) => one.number === slot)?.mode;
  const native = nativeRows(reach, device.driver, reading.content.values, nativeEdits, slot, modeKey);
  const changedCount = edits.length + nativeEdits.length;
  const envelope = screen.kind === "known" ? screen.envelope : undefined;
  return (
    <section aria-labelledby="settings-head">
      <h2 id="settings-head" className="mb-2 text-xl">Settings</h2>
      <Segmented label="What a setting acts on" value={reach} onChange={onReach} choices={REACHES} />
      <p className="mt-2 mb-1 text-sm text-muted">{reachWords(reach, slot, alsoMoved(reach, planned, slot))}</p>
      {rows.length + native.length === 0 ? <p className="py-4 text-muted">Slot {slot} is empty: it has no mode to adjust.</p> : null}
      {rows.map((row) => (
        <SettingControl
          key={row.path} row={row} was={before ? getValue(before.document, row.path) : undefined} disabled={!isFree} onChange={(value) => edit({ path: row.path, value })}
          safe={envelope && row.range ? safeStretch(row.path, { document: planned, device: device.limits, screen: envelope }) : undefined}
        />
      ))}
      {native.length === 0 ? null : <h3 className="mt-4 border-t border-line pt-3 text-base">Only on this device</h3>}
      {native.map((row) => (
        <NativeControl key={row.key} row={row} was={before?.values[row.key]} disabled={!isFree} onChange={(value) => editNative({ key: row.key, value })} />
      ))}
      <div className="mt-4 flex flex-wrap items-center gap-3 border-t border-line pt-4" aria-live="polite">
        <Button kind="primary" disabled={!isFree || changedCount === 0} onClick={reviewEdits}>Review the plan</Button>
        <Button disabled={changedCount === 0} onClick={clearEdits}>Discard</Button>
        <span className="text-sm text-muted">{changedCount === 0 ? "Nothing is changed yet." : `${formatCount(changedCount, "value", "values")} changed here, nothing sent.`}</span>
      </div>
    </section>
  );
}

type ControlProps = { readonly row: SettingRow; readonly was: unknown; readonly safe: readonly [number, number] | null | undefined; readonly disabled: boolean; readonly onChange: (value: number | string) => void };

function SettingControl({ row, was, safe, disabled, onChange }: ControlProps) {
  const { setting, range, choices } = row;
  if (range !== undefined && typeof row.planned === "number") {
    return (
      <RangeRuler
        label={setting.label} unit={setting.unit ?? ""} range={range} safe={safe} disabled={disabled} onChange={onChange}
        was={typeof was === "number" && was !== row.now ? was : undefined} now={typeof row.now === "number" ? row.now : undefined} planned={row.planned === row.now ? undefined : row.planned}
      />
    );
  }
  if (choices === undefined || typeof row.planned !== "string") return null;
  return (
    <SelectField
      label={setting.label} value={row.planned} disabled={disabled} onChange={(event) => onChange(event.target.value)} fieldClassName="py-2"
      options={choices.map((choice) => ({ value: choice, label: formatSetting(choice, setting) }))}
    />
  );
}

type NativeControlProps = { readonly row: NativeRow; readonly was: NativeValue | undefined; readonly disabled: boolean; readonly onChange: (value: NativeValue) => void };

function NativeControl({ row, was, disabled, onChange }: NativeControlProps) {
  const { setting } = row;
  const range = shownRange(setting);
  const number = (native: NativeValue) => Number(shownValue(setting, native));
  const set = (shown: number | string) => {
    const native = nativeFromShown(setting, shown);
    if (native !== undefined) onChange(native);
  };
  if (range !== undefined) {
    return (
      <RangeRuler
        label={setting.label} unit={range.unit ?? ""} range={range} disabled={disabled} onChange={set} now={number(row.now)}
        was={was !== undefined && was !== row.now ? number(was) : undefined} planned={row.planned === row.now ? undefined : number(row.planned)}
      />
    );
  }
  const choices = setting.value.type === "choice" ? setting.value.choices : [];
  return (
    <SelectField
      label={setting.label} value={String(row.planned)} disabled={disabled} onChange={(event) => set(event.target.value)} fieldClassName="py-2"
      options={choices.map(({ native, label }) => ({ value: String(native), label }))}
    />
  );
}
