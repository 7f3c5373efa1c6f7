import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { signOutOf } from "@/lib/server/sign-in";

export const DELETE = withRoute({ role: "owner", summary: "Sign out.", status: 204 }, async ({ request }) => {
  const response = json(null, { status: 204 });
  for (const line of await signOutOf(request)) response.headers.append("set-cookie", line);
  return response;
});
