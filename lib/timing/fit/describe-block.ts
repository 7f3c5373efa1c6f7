import { figure, hz, kHz, mHz, withUnit } from "@/lib/timing/figure-text";
import type { FitBlock, FitConstraint, FitRequest } from "@/lib/timing/fit/fit-types";
import { lineRateNeed } from "@/lib/timing/fit/line-rate-need";
import { blankingGuide } from "@/lib/timing/fit/reference";
import type { RasterTiming } from "@/lib/timing/raster";
import {
  axisBlank,
  fieldBlankUs,
  fieldLines,
  fieldRateHz,
  horizontalUs,
  lineRateHz,
  lineTotal,
} from "@/lib/timing/rates";
import { nearestInSpan } from "@/lib/timing/span";

type Block = Omit<FitBlock, "alone">;

/** The limit that is nearest to what is needed, of the spans of one kind. */
function nearestLimit(needed: number, spans: readonly (readonly [number, number])[]): number {
  const ends = spans.map((span) => nearestInSpan(needed, span));
  return ends.reduce((best, end) => (Math.abs(end - needed) < Math.abs(best - needed) ? end : best), ends[0] ?? needed);
}

function lineRateBlock(request: FitRequest, timing: RasterTiming): Block {
  const constraint = "screen-line-rate";
  const need = lineRateNeed(request);
  if (need === undefined) {
    const needed = lineRateHz(timing);
    const limit = nearestLimit(
      needed,
      request.screen.bands.map((band) => band.lineRateHz),
    );
    return {
      constraint,
      needed,
      limit,
      unit: "Hz",
      sentence: `It takes ${kHz(needed)}, and the nearest that this screen takes is ${kHz(limit)}.`,
    };
  }
  const { neededHz, limitHz, totalLines, blankLines, fieldRateAtLimitHz, side } = need;
  const lines = `${figure(totalLines - blankLines)} lines${request.wish.interlaced ? " a field" : ""}`;
  const how = side === "above" ? "need" : "make at most";
  const end = side === "above" ? "ends" : "begins";
  const extreme = side === "above" ? "fastest" : "slowest";
  const sentence =
    `${lines} ${how} ${figure(totalLines)} in all with ${figure(blankLines)} of blanking; at ${hz(request.wish.fieldRateHz)} ` +
    `that is ${kHz(neededHz)} and this screen ${end} at ${kHz(limitHz)}; at its ${extreme} they run at ${hz(fieldRateAtLimitHz)}.`;
  return {
    constraint,
    needed: neededHz,
    limit: limitHz,
    unit: "Hz",
    totalLines,
    blankLines,
    fieldRateAtLimitHz,
    sentence,
  };
}

function screenBlock(request: FitRequest, constraint: FitConstraint, timing: RasterTiming): Block | undefined {
  const { screen } = request;
  const us = horizontalUs(timing);
  const least = (needed: number, limit: number | undefined, what: string): Block => ({
    constraint,
    needed,
    limit,
    unit: "µs",
    sentence: `There is room for ${what} of ${withUnit(needed, "µs", 2)}, and this screen wants ${withUnit(limit ?? 0, "µs", 2)}.`,
  });
  switch (constraint) {
    case "screen-line-rate":
      return lineRateBlock(request, timing);
    case "screen-field-rate": {
      const needed = fieldRateHz(timing);
      const limit = nearestLimit(
        needed,
        screen.bands.map((band) => band.fieldRateHz),
      );
      return {
        constraint,
        needed,
        limit,
        unit: "Hz",
        sentence: `It takes ${hz(needed)}, and the nearest that this screen takes at that line rate is ${hz(limit)}.`,
      };
    }
    case "screen-interlace":
      return { constraint, sentence: "This screen does not take interlaced rasters." };
    case "screen-clock": {
      const [needed, limit] = [timing.pixelClockHz, screen.maxPixelClockHz];
      return {
        constraint,
        needed,
        limit,
        unit: "Hz",
        sentence: `It takes a pixel clock of ${mHz(needed)}, and this screen ends at ${mHz(limit ?? 0)}.`,
      };
    }
    case "screen-sync":
      return least(us.sync, screen.minSyncUs, "a sync");
    case "screen-back-porch":
      return least(us.backPorch, screen.minBackPorchUs, "a back porch");
    case "screen-field-blank":
      return least(fieldBlankUs(timing), screen.minFieldBlankUs, "a field blanking");
    default:
      return undefined;
  }
}

function deviceBlock(request: FitRequest, constraint: FitConstraint, timing: RasterTiming): Block | undefined {
  const { device } = request;
  const clock = device?.clockHz;
  switch (constraint) {
    case "device-clock": {
      const needed = timing.pixelClockHz;
      const limit = clock === undefined ? needed : nearestInSpan(needed, [clock.min, clock.max]);
      const end = needed > limit ? "ends" : "begins";
      return {
        constraint,
        needed,
        limit,
        unit: "Hz",
        sentence: `It takes a pixel clock of ${mHz(needed)}, and this device ${end} at ${mHz(limit)}.`,
      };
    }
    case "device-clock-step": {
      const [needed, limit] = [timing.pixelClockHz, clock?.step];
      return {
        constraint,
        needed,
        limit,
        unit: "Hz",
        sentence: `It takes a pixel clock of ${mHz(needed)}, and this device steps by ${mHz(limit ?? 0)}.`,
      };
    }
    case "device-multiple": {
      const [needed, limit] = [timing.horizontal.active, device?.horizontalMultiple];
      return {
        constraint,
        needed,
        limit,
        unit: "clocks",
        sentence: `This device takes horizontal figures in multiples of ${figure(limit ?? 1)}.`,
      };
    }
    case "device-line-total": {
      const [needed, limit] = [lineTotal(timing), device?.maxLineTotal];
      return {
        constraint,
        needed,
        limit,
        unit: "clocks",
        sentence: `It takes ${figure(needed)} clocks a line, and this device ends at ${figure(limit ?? 0)}.`,
      };
    }
    case "device-field-lines": {
      const [needed, limit] = [fieldLines(timing), device?.maxFieldLines];
      return {
        constraint,
        needed,
        limit,
        unit: "lines",
        sentence: `It takes ${figure(needed)} lines a field, and this device ends at ${figure(limit ?? 0)}.`,
      };
    }
    case "device-interlace":
      return { constraint, sentence: "This device does not put interlaced rasters out." };
    case "device-parts":
      return {
        constraint,
        sentence: "This device cannot hold one of the porches, the sync or the picture that it takes.",
      };
    default:
      return undefined;
  }
}

function standardBlock(constraint: FitConstraint, timing: RasterTiming): Block | undefined {
  const guide = blankingGuide(lineRateHz(timing), fieldRateHz(timing));
  if (constraint === "standard-line-blank") {
    const { frontPorch, sync, backPorch } = horizontalUs(timing);
    const needed = frontPorch + sync + backPorch;
    const limit = nearestInSpan(needed, guide.spanUs.blank);
    return {
      constraint,
      needed,
      limit,
      unit: "µs",
      sentence: `It leaves ${withUnit(needed, "µs", 2)} of line blanking, and the standards' nearest is ${withUnit(limit, "µs", 2)}.`,
    };
  }
  if (constraint === "standard-field-blank") {
    const needed = axisBlank(timing.vertical);
    const limit = nearestInSpan(needed, guide.spanLines.blank);
    return {
      constraint,
      needed,
      limit,
      unit: "lines",
      sentence: `It leaves ${figure(needed)} lines of field blanking, and the standards' nearest is ${figure(limit)}.`,
    };
  }
  return undefined;
}

function wishBlock(request: FitRequest, constraint: FitConstraint, timing: RasterTiming): Block | undefined {
  const { wish } = request;
  switch (constraint) {
    case "wish-line-rate":
      return {
        constraint,
        needed: lineRateHz(timing),
        limit: wish.lineRateHz,
        unit: "Hz",
        sentence: `With the line rate left open ${kHz(lineRateHz(timing))} fit.`,
      };
    case "wish-clock":
      return {
        constraint,
        needed: timing.pixelClockHz,
        limit: wish.pixelClockHz,
        unit: "Hz",
        sentence: `With the pixel clock left open ${mHz(timing.pixelClockHz)} fit.`,
      };
    case "wish-line-total":
      return {
        constraint,
        needed: lineTotal(timing),
        limit: wish.lineTotal,
        unit: "clocks",
        sentence: `With the line total left open ${figure(lineTotal(timing))} clocks fit.`,
      };
    case "wish-field-lines":
      return {
        constraint,
        needed: fieldLines(timing),
        limit: wish.fieldLines,
        unit: "lines",
        sentence: `With the field's lines left open ${figure(fieldLines(timing))} fit.`,
      };
    case "wish-field-rate":
      return {
        constraint,
        needed: fieldRateHz(timing),
        limit: wish.fieldRateHz,
        unit: "Hz",
        sentence: `With the refresh left open ${hz(fieldRateHz(timing))} fit.`,
      };
    default:
      return undefined;
  }
}

/**
 * One constraint that is in the way, with its figures.
 *
 * @param timing the best raster that fits without it
 */
export function describeBlock(request: FitRequest, constraint: FitConstraint, timing: RasterTiming): Block {
  return (
    screenBlock(request, constraint, timing) ??
    deviceBlock(request, constraint, timing) ??
    standardBlock(constraint, timing) ??
    wishBlock(request, constraint, timing) ?? { constraint, sentence: "" }
  );
}
