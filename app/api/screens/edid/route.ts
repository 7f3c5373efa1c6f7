import { problem } from "@/app/api/_http/problem";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { EDID_BYTES, edidAnswer } from "@/lib/contracts/edid";
import { edidScreen } from "@/lib/timing/edid/edid-screen";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "The screen that an EDID describes; nothing is stored.",
    rawBody: ["application/octet-stream"],
    response: edidAnswer,
    limit: { bodyBytes: EDID_BYTES },
  },
  ({ body }) => {
    const result = edidScreen(body);
    if (result.ok) return json(result.value);
    return problem(422, { code: result.error.code, detail: result.error.message });
  },
);
