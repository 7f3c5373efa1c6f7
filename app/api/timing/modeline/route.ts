import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { modelineAnswer, modelineRequest } from "@/lib/contracts/timing";
import { convertModeline } from "@/lib/timing/modeline/convert-modeline";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "A modeline as a timing, or a timing as a modeline.",
    body: modelineRequest,
    response: modelineAnswer,
    limit: { bodyBytes: 65_536 },
  },
  ({ body }) => {
    const result = convertModeline(body);
    return result.ok ? json(result.value) : problem(400, { errors: result.error });
  },
);
