"use client";

import { FindingWord } from "@/components/ui/finding-icon";
import { classNames } from "@/components/ui/class-names";
import { formatLineRate } from "@/components/ui/figures";
import { ModeMark } from "@/components/video/mode-glyph";
import { RulerTrack } from "@/components/video/ruler-track";
import { Tape } from "@/components/video/tape";
import { modeName } from "@/lib/timing/mode-name";
import { lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";
import { neutralSetting } from "@/lib/profile/neutral-settings";
import { findMode, patternOf } from "@/lib/profile/paths";
import { safeStretch } from "@/lib/profile/safe-stretch";
import { formatSetting } from "@/components/bench/format-value";
import { useBench } from "@/components/bench/bench-provider";
import type { ReviewGroup, ReviewRow } from "@/components/bench/review-rows";

const HEADS = ["Value", "Now", "Planned", "Device range, with your screen's safe stretch", "Check"];

/** Each value now, planned, in the device's range and the screen's safe stretch. Rows stand as blocks on a phone. */
export function ReviewTable({ groups }: { readonly groups: readonly ReviewGroup[] }) {
  return (
    <table className="block w-full border-collapse text-left md:table">
      <caption className="sr-only">What the plan changes</caption>
      <thead className="hidden text-sm text-muted md:table-header-group">
        <tr>{HEADS.map((head) => <th key={head} scope="col" className="border-b border-line py-2 pr-3.5 font-[500]">{head}</th>)}</tr>
      </thead>
      {groups.map((group) => (
        <tbody key={group.kind === "slot" ? `s${group.number}` : group.kind === "mode" ? `m${group.key}` : "e"} className="block md:table-row-group">
          <tr className="block md:table-row"><th scope="rowgroup" colSpan={HEADS.length} className="block border-b border-line pt-4 pb-2 md:table-cell"><GroupHead group={group} /></th></tr>
          {group.rows.map((row) => <Row key={row.path} row={row} />)}
        </tbody>
      ))}
    </table>
  );
}

function GroupHead({ group }: { readonly group: ReviewGroup }) {
  if (group.kind === "slot") return <Tape number={group.number} name={group.name} />;
  if (group.kind === "everywhere") return <span className="heading text-lg">Everywhere</span>;
  return (
    <span className="heading text-lg">Mode {group.key} <span className="text-sm font-[400] text-muted">{group.usedBy.length === 0 ? "used by no slot" : `used by slot ${group.usedBy.join(", ")}`}</span></span>
  );
}

function Row({ row }: { readonly row: ReviewRow }) {
  const isStopped = row.findings.some((finding) => finding.severity === "stop");
  const cell = "border-line py-1 pr-3.5 align-middle md:border-b md:py-2";
  return (
    <tr className={classNames("grid grid-cols-[1fr_auto_auto] items-baseline border-b border-line py-1.5 md:table-row md:border-0", isStopped && "bg-[color-mix(in_srgb,var(--halt)_7%,transparent)]")}>
      <th scope="row" className={classNames(cell, "font-[400]")}>{row.label}</th>
      <td className={classNames(cell, "figure text-muted md:text-text")}><span className="sr-only md:hidden">now </span><Value row={row} value={row.now} /></td>
      <td className={classNames(cell, "figure font-strong")}><span className="sr-only md:hidden">planned </span><Value row={row} value={row.planned} /></td>
      <td className={classNames(cell, "col-span-3")}><Ruler row={row} /></td>
      <td className={classNames(cell, "col-span-3")}><Verdict row={row} /></td>
    </tr>
  );
}

/** A row marked `isTiming` holds rasters: `review-rows` puts nothing else there. */
function asTiming(value: unknown): RasterTiming | null {
  return typeof value === "object" && value !== null && "horizontal" in value ? (value as RasterTiming) : null;
}

function Value({ row, value }: { readonly row: ReviewRow; readonly value: unknown }) {
  const document = useBench((state) => state.review?.planned.merged);
  if (row.isTiming) {
    const timing = asTiming(value);
    return timing ? <span className="whitespace-nowrap">{modeName(timing)}</span> : <>none</>;
  }
  if (row.path.endsWith(".mode") && typeof value === "string") {
    const timing = document ? findMode(document, value)?.timing : undefined;
    return <span className="whitespace-nowrap">{timing ? modeName(timing) : value} <span className="text-muted">({value})</span></span>;
  }
  return <span className="whitespace-nowrap">{formatSetting(value, neutralSetting(patternOf(row.path) ?? ""), row.unit)}</span>;
}

function Ruler({ row }: { readonly row: ReviewRow }) {
  const document = useBench((state) => state.review?.planned.merged);
  const screen = useBench((state) => state.screen);
  const limits = useBench((state) => state.device?.limits);
  if (row.isTiming) {
    const timing = asTiming(row.planned);
    return timing ? <span className="flex flex-wrap items-center gap-x-3"><ModeMark timing={timing} /><span className="figure text-muted">{formatLineRate(lineRateHz(timing))}</span></span> : null;
  }
  if (row.range === undefined || typeof row.planned !== "number" || !document || !limits) return null;
  const safe = screen.kind === "known" ? safeStretch(row.path, { document, device: limits, screen: screen.envelope }) : undefined;
  return <RulerTrack className="max-w-[270px]" range={row.range} safe={safe} was={typeof row.now === "number" ? row.now : undefined} planned={row.planned} />;
}

function Verdict({ row }: { readonly row: ReviewRow }) {
  const worst = row.findings.find((finding) => finding.severity === "stop") ?? row.findings.find((finding) => finding.severity === "caution");
  return worst ? <FindingWord severity={worst.severity}>{worst.severity === "stop" ? "does not fit" : "read the caution"}</FindingWord> : <FindingWord severity="fits">fits</FindingWord>;
}
