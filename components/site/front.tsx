import { DEMO_SLUG, DEMO_SOURCE, demoDocument } from "@/components/site/demo-device";
import { Promises } from "@/components/site/promises";
import { SerialSupport } from "@/components/site/serial-support";
import { TryPicture } from "@/components/site/try-picture";
import { ButtonLink } from "@/components/ui/button";
import { screenPresets } from "@/lib/timing/screen-presets";

/** A wide set of both systems with the frame that such a set may have: invented, for the picture of the front page. */
function demoScreen() {
  const preset = screenPresets.find(({ id }) => id === "bt470-both");
  if (preset === undefined) throw new Error("The preset of the front page is gone");
  return {
    ...preset.envelope,
    name: "wide CRT",
    aspect: "16:9",
    visiblePct: { left: 2.5, right: 2.5, top: 2.5, bottom: 2.5 },
  };
}

/** What this is, and a simulated device to try at once. */
export function Front() {
  const screen = demoScreen();
  return (
    <>
      <div className="gutter grid grid-cols-1 items-start gap-x-14 gap-y-10 border-b border-line pb-10 pt-8 md:px-16 md:pt-14 lg:grid-cols-[minmax(340px,500px)_minmax(0,1fr)]">
        <div>
          <h1 className="text-4xl tracking-[-0.02em] sm:text-5xl">A console for video scalers with a serial port</h1>
          <p className="mt-5 max-w-[44ch] text-[18px] leading-normal text-muted">
            Keep every slot backed up. Try somebody else’s settings on your CRT after they were checked against what it
            takes. Do nothing, and the old ones come back.
          </p>
          <div className="mt-7 flex flex-col items-start gap-3">
            <ButtonLink kind="primary" size="large" href={`/bench?simulated=${DEMO_SLUG}`}>
              Try a simulated device
            </ButtonLink>
            <div className="flex flex-wrap gap-3">
              <ButtonLink size="large" href="/bench">
                Connect a device
              </ButtonLink>
              <ButtonLink size="large" href="/library">
                Look through the library
              </ButtonLink>
            </div>
            <SerialSupport />
          </div>
        </div>
        <TryPicture deviceName="Lanternfield LF-8" document={demoDocument()} source={DEMO_SOURCE} screen={screen} />
      </div>
      <Promises band={screen.bands[1]?.lineRateHz ?? [15_577, 15_892]} />
    </>
  );
}
