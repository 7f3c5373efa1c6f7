import { LineWaveform } from "@/components/video/mode-waveform";
import { standardRaster } from "@/lib/timing/standards";

const reasons = [
  ["Backups stay", "Every slot of every device, by date, with what changed between two."],
  [
    "Writes have a way back",
    "A change is checked, tried for as long as you say, and put back by itself unless you keep it.",
  ],
  [
    "Screens are remembered",
    "What each CRT takes and where that figure comes from, so that checks need no second thought.",
  ],
] as const;

/** What an account is for, beside the forms that lead to one. */
export function AccountAside() {
  return (
    <aside className="border-line max-lg:border-t max-lg:pt-8 lg:border-l lg:pl-14">
      <LineWaveform timing={standardRaster("240p60").timing} />
      <dl className="mt-8 grid grid-cols-1 gap-5 sm:grid-cols-3 lg:grid-cols-1 xl:grid-cols-3">
        {reasons.map(([fact, detail]) => (
          <div key={fact}>
            <dt className="heading text-xl">{fact}</dt>
            <dd className="mt-1 text-muted">{detail}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-8 max-w-[60ch] border-t border-line pt-5 text-muted">
        A simulated device, the library and the screens can be looked at without an account.
      </p>
    </aside>
  );
}
