import type { ReactNode } from "react";
import { fitOf } from "@/components/screens/fit-words";
import { knownModes } from "@/components/screens/known-modes";
import type { KnownMode } from "@/components/screens/known-modes";
import { EDID_GROUP } from "@/components/screens/use-device-modes";
import type { DeviceModes } from "@/components/screens/use-device-modes";
import { nearBands } from "@/components/video/plane-geometry";
import { RatePlane } from "@/components/video/rate-plane";
import type { RatePoint } from "@/components/video/rate-plane";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { fieldRateHz, lineRateHz, linesPerField } from "@/lib/timing/rates";

/** Line counts whose rays help to read the plane: those of the known modes; their variants would lie on them. */
const rayLines = [
  ...new Set(knownModes.filter(({ isVariant }) => isVariant !== true).map(({ timing }) => linesPerField(timing))),
].filter((lines) => Number.isInteger(lines));

function pointsFor(modes: readonly KnownMode[], envelope: ScreenEnvelope, fitting: RatePoint["kind"]): RatePoint[] {
  return modes.map(({ id, name, timing }) => ({
    id,
    label: name,
    lineRateHz: lineRateHz(timing),
    fieldRateHz: fieldRateHz(timing),
    kind: fitOf(timing, envelope).fits ? fitting : "outside",
  }));
}

export type ScreenPlaneProps = {
  readonly envelope: ScreenEnvelope;
  readonly devices?: readonly DeviceModes[];
  readonly heightPx?: number;
};

/** Where the known modes fall in the bands of a screen: the published ones, and those of the devices before it. */
export function ScreenPlane({ envelope, devices = [], heightPx }: ScreenPlaneProps) {
  const own = devices.flatMap(({ deviceName, modes }) =>
    (modes ?? []).map((mode) => ({ ...mode, name: `${mode.name} of ${deviceName}` })),
  );
  const points = [...pointsFor(knownModes, envelope, "fits"), ...pointsFor(own, envelope, "chosen")];
  return (
    <div>
      <RatePlane
        screenName={envelope.name}
        bands={envelope.bands}
        points={nearBands(points, envelope.bands)}
        rayLines={rayLines}
        heightPx={heightPx}
      />
      <p className="mt-1 flex flex-wrap gap-x-5 gap-y-1 text-sm text-muted">
        <PlaneKey word="published mode">
          <circle cx={7} cy={7} r={4} className="fill-bg stroke-signal" strokeWidth={2} />
        </PlaneKey>
        {own.length === 0 ? null : (
          <PlaneKey word={devices.some(({ deviceId }) => deviceId === EDID_GROUP) ? "in its EDID" : "on its devices"}>
            <circle cx={7} cy={7} r={5} className="fill-lamp" />
          </PlaneKey>
        )}
        <PlaneKey word="does not fit">
          <path d="M4 0h6l4 4v6l-4 4h-6l-4-4v-6z" className="fill-halt" />
        </PlaneKey>
      </p>
    </div>
  );
}

function PlaneKey({ word, children }: { readonly word: string; readonly children: ReactNode }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <svg aria-hidden width={14} height={14}>
        {children}
      </svg>
      {word}
    </span>
  );
}
