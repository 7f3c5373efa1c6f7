import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { describeAnswer, describeRequest } from "@/lib/contracts/timing";
import { checkProfile } from "@/lib/profile/check/check-profile";
import { PROFILE_FORMAT, PROFILE_VERSION } from "@/lib/profile/document";
import { describeRaster } from "@/lib/timing/describe-raster";
import { envelopeProblems } from "@/lib/timing/envelope-problems";
import { rasterProblems } from "@/lib/timing/raster-problems";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "Totals, rates and parts of a raster, and what a screen makes of it.",
    body: describeRequest,
    response: describeAnswer,
    limit: { bodyBytes: 65_536 },
  },
  ({ body: { timing, screen } }) => {
    const errors = [
      ...rasterProblems(timing).map(({ path, message }) => ({ path: `timing.${path}`, message })),
      ...(screen === undefined ? [] : envelopeProblems(screen)).map(({ path, message }) => ({
        path: `screen.${path}`,
        message,
      })),
    ];
    if (errors.length > 0) return problem(400, { errors });
    // One mode and one slot that shows it: the checks speak of modes that something uses.
    const document = {
      format: PROFILE_FORMAT,
      version: PROFILE_VERSION,
      modes: [{ key: "raster", timing }],
      slots: [{ number: 1, mode: "raster" }],
    } as const;
    const found = checkProfile({
      document: { ...document, modes: [...document.modes], slots: [...document.slots] },
      screen,
    });
    // Without a screen nothing was asked about one, so that nothing is known of it is no finding here.
    const findings = screen === undefined ? found.filter(({ rule }) => rule !== "unknown.screen") : found;
    return json({ ...describeRaster(timing), findings });
  },
);
