import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { fitAnswer, fitRequest } from "@/lib/contracts/timing";
import { fitOnDevice } from "@/lib/profile/fit-on-device";
import { limitsOf } from "@/lib/server/device-limits";
import type { FittedRaster } from "@/lib/timing/fit/fit-types";

/** The cost is good for ranking alone, and the list is ranked. */
function answered<T extends FittedRaster>({ porchCost: _, ...raster }: T): Omit<T, "porchCost"> {
  return raster;
}

export const POST = withRoute(
  {
    role: "anyone",
    summary: "Rasters that meet a wish on a screen and a device, best first; or why none does, and the nearest.",
    body: fitRequest,
    response: fitAnswer,
    // A request that is made to last takes about half a second of a processor, so few a minute are answered.
    limit: { bodyBytes: 65_536, requestsPerMinute: 30, perAddress: true },
  },
  ({ body }) => {
    const device = limitsOf(body.device);
    if (!device.ok) {
      return problem(422, { code: device.error, errors: [{ path: "device", message: "No driver has this slug." }] });
    }
    const { screen, device: _, limit, keep, ...wish } = body;
    const result = fitOnDevice({ wish, screen, device: device.value, limit, keep });
    if (result.ok) {
      const { fits, blockedBy, nearest } = result.value;
      return json({ fits: fits.map(answered), blockedBy, nearest: nearest.map(answered) });
    }
    const [first] = result.error;
    // Nothing is wrong with any member of it: it takes more tries than one answer has.
    if (first?.path === "") return problem(422, { code: "too-much-to-try", detail: first.message });
    return problem(400, { errors: result.error });
  },
);
