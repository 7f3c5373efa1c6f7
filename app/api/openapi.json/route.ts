import { describeApi } from "@/app/api/_http/openapi";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { routeModules } from "@/app/api/openapi.json/routes";

export const GET = withRoute(
  { role: "anyone", summary: "This description, made from the routes' own declarations." },
  () => json(describeApi(routeModules)),
);
