import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { attenuatorAnswer, attenuatorRequest } from "@/lib/contracts/signal";
import { attenuator } from "@/lib/timing/attenuator";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "The series resistor that brings a sync output to a screen's level.",
    body: attenuatorRequest,
    response: attenuatorAnswer,
    limit: { bodyBytes: 4096 },
  },
  ({ body }) => {
    const result = attenuator(body);
    return result.ok ? json(result.value) : problem(400, { errors: result.error });
  },
);
