import Link from "next/link";
import type { ReactNode } from "react";
import { LimitTable } from "@/components/screens/limit-table";
import { DeviceFits, StandardFits } from "@/components/screens/mode-fits";
import { ScreenPlane } from "@/components/screens/screen-plane";
import type { DeviceModes } from "@/components/screens/use-device-modes";
import type { EnvelopeLimit, ScreenEnvelope } from "@/lib/timing/envelope";

export type ScreenDetailProps = {
  readonly envelope: ScreenEnvelope;
  /** Id of the screen or of the standard envelope, by which other pages take it over; a screen to be has none. */
  readonly id?: string;
  readonly above?: ReactNode;
  readonly acts?: ReactNode;
  /** Stands between the name and the limits. */
  readonly lead?: ReactNode;
  readonly notes?: Readonly<Partial<Record<EnvelopeLimit, string>>> | undefined;
  /** Devices that stand before it, with their modes. */
  readonly devices?: readonly DeviceModes[];
  readonly foot?: ReactNode;
};

/** A screen whole: name and acts, plane, known modes, limits. */
export function ScreenDetail({ envelope, id, above, acts, lead, notes, devices = [], foot }: ScreenDetailProps) {
  return (
    <article aria-label={envelope.name} className="min-w-0">
      <div className="mb-4 flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <div className="min-w-0">
          {above === undefined ? null : <p className="text-sm text-muted">{above}</p>}
          <h2 className="break-words text-2xl">{envelope.name}</h2>
        </div>
        {acts === undefined ? null : <div className="flex flex-wrap gap-2.5">{acts}</div>}
      </div>
      {lead}
      <div className="grid grid-cols-1 gap-x-10 gap-y-6 xl:grid-cols-2">
        <div className="min-w-0">
          <ScreenPlane envelope={envelope} devices={devices} heightPx={300} />
          <h3 className="mb-1 mt-6 text-lg">Limits</h3>
          <LimitTable envelope={envelope} notes={notes} id={id} />
        </div>
        <div>
          <div className="mb-2 flex items-baseline justify-between gap-3">
            <h3 className="text-lg">Published modes on it</h3>
            {id === undefined ? null : (
              <Link href={`/standards?screen=${encodeURIComponent(id)}`} className="link text-sm">
                All standards on it
              </Link>
            )}
          </div>
          <StandardFits envelope={envelope} />
          {devices.map((device) => (
            <DeviceFits key={device.deviceId} device={device} envelope={envelope} />
          ))}
        </div>
      </div>
      {foot}
    </article>
  );
}
