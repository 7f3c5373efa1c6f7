import { z } from "zod";
import { driverSlug, driverVersionNumber } from "@/lib/contracts/driver";
import { idSchema, pageOf, pageQuery, timeSchema } from "@/lib/contracts/page";
import { conformanceReportSchema } from "@/lib/serial/conformance/report";

/** Computes a report at the server, of the definition as it is stored. */
export const newConformance = z.object({ slug: driverSlug, version: driverVersionNumber });
export type NewConformance = z.input<typeof newConformance>;
export const conformanceQuery = pageQuery.extend({ slug: driverSlug, version: driverVersionNumber });
export type ConformanceQuery = z.infer<typeof conformanceQuery>;

export const conformanceView = z.object({
  id: idSchema,
  slug: z.string(),
  version: z.string(),
  driverHash: z.string(),
  green: z.boolean(),
  /** The definition was changed since. */
  outdated: z.boolean(),
  author: z.object({ id: idSchema, name: z.string() }).nullable(),
  createdAt: timeSchema,
});
export type ConformanceView = z.infer<typeof conformanceView>;
export const conformancePage = pageOf(conformanceView);

export const conformanceDetail = conformanceView.extend({ report: conformanceReportSchema });
export type ConformanceDetail = z.infer<typeof conformanceDetail>;
