import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { standardsPage, standardsQuery } from "@/lib/contracts/timing";
import { searchCatalogue } from "@/lib/timing/catalogue/search-catalogue";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "The published rasters that we know, each with its document; by lines, field rate and words.",
    query: standardsQuery,
    response: standardsPage,
  },
  ({ query: { lines, rate, text } }) =>
    json({ items: searchCatalogue({ lines, rateHz: rate, text }), nextCursor: null }),
);
