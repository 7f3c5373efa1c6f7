import { documentBytes } from "@/app/api/_http/limits";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { compareAnswer, compareRequest } from "@/lib/contracts/check";
import { compareDocuments } from "@/lib/profile/compare";

export const POST = withRoute(
  {
    role: "anyone",
    summary: "Every value that two documents name differently.",
    body: compareRequest,
    response: compareAnswer,
    limit: { bodyBytes: 2 * documentBytes },
  },
  ({ body: { left, right } }) => json({ changes: compareDocuments(left, right) }),
);
