import type { ReactNode } from "react";
import { formatCountdown } from "@/components/ui/figures";
import { RangeRuler } from "@/components/video/range-ruler";
import type { Span } from "@/lib/timing/envelope";
import { lineRateHz } from "@/lib/timing/rates";
import { standardRaster } from "@/lib/timing/standards";

/** Unless the owner asks for another, a trial lasts so long. */
const TRIAL_SECONDS = 30;

/** What Backporch holds to, each with the thing that it looks like. */
export function Promises({ band }: { readonly band: Span }) {
  const kHz = (hz: number) => hz / 1000;
  return (
    <div className="gutter grid grid-cols-1 border-line md:px-16 lg:grid-cols-3 lg:divide-x lg:divide-line">
      <Held title="Checked before a byte is written">
        <RangeRuler
          label="Line rate"
          unit="kHz"
          range={{ min: 15, max: 17, step: 0.001 }}
          safe={[kHz(band[0]), kHz(band[1])]}
          now={kHz(lineRateHz(standardRaster("240p60").timing))}
        />
      </Held>
      <Held title="Put back unless you keep it">
        <div className="flex items-center gap-5 py-2">
          <span className="font-mono text-4xl text-lamp [font-stretch:75%]">{formatCountdown(TRIAL_SECONDS)}</span>
          <p className="max-w-[34ch] text-muted">
            New values stay in working memory until you press Keep. A black picture needs no answer.
          </p>
        </div>
      </Held>
      <Held title="Neutral profiles">
        <p className="max-w-[46ch] py-2 text-muted">
          One document for different makers’ devices: modes, placements and slots, each value with its unit. Yours goes
          out the same way, as a file or to the library.
        </p>
      </Held>
    </div>
  );
}

function Held({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <section className="border-line py-6 max-lg:border-b lg:px-8 lg:first:pl-0 lg:last:pr-0">
      <h2 className="text-xl">{title}</h2>
      {children}
    </section>
  );
}
