import { EXAMPLE_TRIES, REASON_TRIES, type Budget } from "@/lib/timing/fit/budget";
import { describeBlock } from "@/lib/timing/fit/describe-block";
import type { FitBlock, FitConstraint, FitRequest } from "@/lib/timing/fit/fit-types";
import { firstRaster, holdsRaster, search, type Found } from "@/lib/timing/fit/search";
import { searchSpace } from "@/lib/timing/fit/search-space";

/**
 * All constraints. Where only several together make a raster fit, they are put back in this order, so that what is
 * left is what says most: a line rate that is out of reach rather than the sync that would go with it.
 */
const constraints: readonly FitConstraint[] = [
  "wish-field-rate",
  "wish-clock",
  "wish-line-rate",
  "wish-line-total",
  "wish-field-lines",
  "standard-line-blank",
  "standard-field-blank",
  "device-clock-step",
  "device-multiple",
  "device-clock",
  "device-field-lines",
  "device-line-total",
  "device-parts",
  "device-interlace",
  "screen-field-rate",
  "screen-field-blank",
  "screen-back-porch",
  "screen-clock",
  "screen-sync",
  "screen-line-rate",
  "screen-interlace",
];

const fitsWithout = (request: FitRequest, without: readonly FitConstraint[], budget: Budget) =>
  holdsRaster(searchSpace(request, new Set(without)), budget);

/** The constraints without which a raster fits, each alone; the wished field rate only where it is the only one. */
function singles(request: FitRequest, budget: Budget): FitConstraint[] {
  const alone = constraints.filter((constraint) => fitsWithout(request, [constraint], budget));
  const others = alone.filter((constraint) => constraint !== "wish-field-rate");
  return others.length > 0 ? others : alone;
}

/** A set of constraints that have to go together: leave one of them in place and nothing fits. */
function together(request: FitRequest, budget: Budget): FitConstraint[] {
  let gone = [...constraints];
  if (!fitsWithout(request, gone, budget)) return [];
  for (const constraint of constraints) {
    const fewer = gone.filter((one) => one !== constraint);
    if (fitsWithout(request, fewer, budget)) gone = fewer;
  }
  return gone;
}

/** The best raster without some constraints; where the tries do not last for that, the first that is found. */
function exampleWithout(request: FitRequest, without: readonly FitConstraint[], budget: Budget): Found | undefined {
  const space = searchSpace(request, new Set(without));
  const [best] = search(space, budget);
  return best ?? firstRaster(space, { left: EXAMPLE_TRIES });
}

/**
 * What keeps everything from fitting, with the figures of the best raster that would fit without it.
 *
 * Each of the list alone is enough to take away (`alone`), or all of them together are. Empty only where no raster
 * could meet the wish with nothing in the way, or where it takes more tries than there are.
 * @param request a request for which `search` found nothing
 */
export function blockedBy(request: FitRequest): FitBlock[] {
  const alone = singles(request, { left: REASON_TRIES });
  const budget = { left: EXAMPLE_TRIES };
  if (alone.length > 0) {
    return alone.flatMap((constraint) => {
      const example = exampleWithout(request, [constraint], budget);
      return example === undefined ? [] : [{ ...describeBlock(request, constraint, example.timing), alone: true }];
    });
  }
  const names = together(request, { left: REASON_TRIES });
  const example = names.length === 0 ? undefined : exampleWithout(request, names, budget);
  if (example === undefined) return [];
  return names.map((constraint) => ({ ...describeBlock(request, constraint, example.timing), alone: false }));
}
