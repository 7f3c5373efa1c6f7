"use client";

import { FindingList } from "@/components/bench/finding-list";
import { FitsIcon } from "@/components/ui/finding-icon";
import { PartHead } from "@/components/ui/page-head";
import { sourceWords as limitSourceWords } from "@/components/screens/limit-words";
import { RatePlane } from "@/components/video/rate-plane";
import type { RatePoint } from "@/components/video/rate-plane";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import type { ModesAnswer } from "@/components/modes/store/answer";
import { rasterWords, shortName } from "@/components/modes/words";
import { lineRateNeed } from "@/lib/timing/fit/line-rate-need";
import { modeName } from "@/lib/timing/mode-name";
import { linesPerField } from "@/lib/timing/rates";

/** Line counts of the television systems: what the eye knows. */
const SYSTEM_LINES = [262, 312] as const;

/** Where the wish and the rasters lie among the screen's bands, and what the checks say of the one in hand. */
export function PlaneColumn() {
  const answer = useModes((state) => state.answer);
  const { takeRemedy } = useModesActs();
  if (answer === null) return null;
  const { request, hand, findings } = answer;
  const { screen } = request;
  const from = screen.sources?.bands;
  return (
    <aside
      aria-label="Where the rasters lie, and what to know"
      className="gutter min-w-0 border-line py-4 max-xl:border-t xl:border-l xl:pl-6"
    >
      <PartHead
        title="Where they lie"
        aside={from === undefined ? undefined : `bands from ${limitSourceWords[from]}`}
      />
      <RatePlane
        screenName={screen.name}
        bands={screen.bands}
        points={pointsOf(answer)}
        rayLines={raysOf(answer)}
        heightPx={300}
      />
      {hand === null ? null : (
        <div className="mt-4">
          <PartHead title={`What to know of ${modeName(hand.timing)}`} />
          {findings.length === 0 ? (
            <p className="flex gap-2">
              <FitsIcon className="mt-[3px]" />
              Inside every limit, and its blanking is a standard’s.
            </p>
          ) : (
            <FindingList findings={findings} onRemedy={takeRemedy} />
          )}
        </div>
      )}
    </aside>
  );
}

/** Where the wish would lie with the least blanking that the standards allow; nowhere while it fits. */
function wishPoint({ request, outcome }: ModesAnswer): RatePoint[] {
  if (outcome.fits.length > 0) return [];
  const need = lineRateNeed(request);
  if (need === undefined) return [];
  return [
    {
      id: "wish",
      label: "wanted",
      lineRateHz: need.neededHz,
      fieldRateHz: request.wish.fieldRateHz,
      kind: "outside",
      isNamed: true,
    },
  ];
}

function pointsOf(answer: ModesAnswer): readonly RatePoint[] {
  const { candidates, hand, findings } = answer;
  const handIsOut = findings.some(({ severity, rule }) => severity === "stop" && rule.startsWith("screen."));
  const rasters = candidates.map(({ key, timing, lineRateHz, fieldRateHz }): RatePoint => {
    const inHand = key === hand?.key;
    return {
      id: key,
      label: inHand ? `${rasterWords(timing)}, in hand` : `${rasterWords(timing)} (${shortName(timing, lineRateHz)})`,
      lineRateHz,
      fieldRateHz,
      kind: inHand ? (handIsOut ? "outside" : "chosen") : "fits",
    };
  });
  // The one in hand is drawn last, so that no ring covers it.
  const sorted = [...rasters.filter(({ id }) => id !== hand?.key), ...rasters.filter(({ id }) => id === hand?.key)];
  return [...wishPoint(answer), ...sorted];
}

function raysOf(answer: ModesAnswer): readonly number[] {
  const { hand, request, outcome } = answer;
  const need = outcome.fits.length > 0 ? undefined : lineRateNeed(request);
  const lines = [
    ...(hand === null ? [] : [linesPerField(hand.timing)]),
    ...(need === undefined ? [] : [need.totalLines]),
    ...SYSTEM_LINES,
  ];
  // Rays a line apart would be one: the first of them stands.
  return lines.filter((count, index) => lines.findIndex((other) => Math.abs(other - count) < 4) === index);
}
