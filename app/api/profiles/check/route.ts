import { documentBytes } from "@/app/api/_http/limits";
import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { checkAnswer, checkRequest } from "@/lib/contracts/check";
import { checkProfile, hasStop } from "@/lib/profile/check/check-profile";
import { limitsOf } from "@/lib/server/device-limits";
import { envelopeProblems } from "@/lib/timing/envelope-problems";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "What a check says of a document, against a device and a screen where they are given.",
    body: checkRequest,
    response: checkAnswer,
    limit: { bodyBytes: documentBytes },
  },
  ({ body }) => {
    const device = limitsOf(body.device);
    if (!device.ok) {
      return problem(422, { code: device.error, errors: [{ path: "device", message: "No driver has this slug." }] });
    }
    const crossed = body.screen === undefined ? [] : envelopeProblems(body.screen);
    if (crossed.length > 0) {
      return problem(400, { errors: crossed.map(({ path, message }) => ({ path: `screen.${path}`, message })) });
    }
    const findings = checkProfile({ ...body, device: device.value });
    return json({ ok: !hasStop(findings), findings });
  },
);
