import type { Metadata } from "next";
import { z } from "zod";
import { BenchPage } from "@/components/bench/bench-page";
import { MAX_RASTER_TEXT } from "@/lib/timing/raster-text";

export const metadata: Metadata = { title: "Bench" };

const incomingSchema = z.object({
  simulated: z.string().max(64).optional().catch(undefined),
  apply: z.uuid().optional().catch(undefined),
  revision: z.coerce.number().int().min(1).optional().catch(undefined),
  restore: z.uuid().optional().catch(undefined),
  mode: z.string().max(MAX_RASTER_TEXT).optional().catch(undefined),
  screen: z.string().max(64).optional().catch(undefined),
});

/** Choose a device; see, back up, recall, change, try and keep. */
export default async function Page({ searchParams }: { readonly searchParams: Promise<Record<string, string | string[] | undefined>> }) {
  return <BenchPage incoming={incomingSchema.parse(await searchParams)} />;
}
