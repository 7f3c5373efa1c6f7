import { fitOf } from "@/components/screens/fit-words";
import { knownModes } from "@/components/screens/known-modes";
import type { KnownMode } from "@/components/screens/known-modes";
import { EDID_GROUP, fitCount } from "@/components/screens/use-device-modes";
import type { DeviceModes } from "@/components/screens/use-device-modes";
import { FindingWord } from "@/components/ui/finding-icon";
import { ModeMark } from "@/components/video/mode-glyph";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

/** The known modes, and whether a screen takes each. */
export function StandardFits({ envelope }: { readonly envelope: ScreenEnvelope }) {
  return <ModeFits modes={knownModes} envelope={envelope} />;
}

function ModeFits({ modes, envelope }: { readonly modes: readonly KnownMode[]; readonly envelope: ScreenEnvelope }) {
  return (
    <ul className="divide-y divide-line border-y border-line">
      {modes.map(({ id, name, timing }) => {
        const fit = fitOf(timing, envelope);
        return (
          <li key={id} className="grid grid-cols-1 items-center gap-x-4 gap-y-0.5 py-1.5 sm:grid-cols-[262px_1fr]">
            <ModeMark timing={timing} name={name} className="whitespace-nowrap" />
            <FindingWord severity={fit.fits ? "fits" : "stop"}>
              {fit.fits ? "fits" : <span className="text-sm font-normal text-muted">{fit.words.split("; ")[0]}</span>}
            </FindingWord>
          </li>
        );
      })}
    </ul>
  );
}

const deviceStates: Readonly<Record<Exclude<DeviceModes["state"], "read">, string>> = {
  reading: "Its last backup is being read.",
  "no-backup": "No backup yet, so its modes are not known.",
  failed: "Its last backup could not be read.",
};

/** Modes of a device that stands before a screen. */
export function DeviceFits({ device, envelope }: { readonly device: DeviceModes; readonly envelope: ScreenEnvelope }) {
  return (
    <section>
      <h3 className="mb-2 mt-5 text-lg">
        {device.deviceId === EDID_GROUP ? "Modes of its EDID" : `In the slots of ${device.deviceName}`}
        {device.modes === null ? null : (
          <span className="ml-3 font-sans text-sm font-normal text-muted">{fitCount(device.modes, envelope)}</span>
        )}
      </h3>
      {device.state === "read" ? (
        <ModeFits modes={device.modes ?? []} envelope={envelope} />
      ) : (
        <p className="text-sm text-muted">{deviceStates[device.state]}</p>
      )}
    </section>
  );
}
