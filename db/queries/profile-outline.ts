import type { ProfileOutline } from "@/lib/contracts/profile";
import type { ProfileDocument } from "@/lib/profile/document";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { lineRateHz } from "@/lib/timing/rates";

/** Modes that a list shows of one profile; more are only counted. */
const shownModes = 12;

/** What lists and search need of a document: its first modes, counts, and the span of its line rates. */
export type SearchedColumns = {
  readonly title: string;
  readonly summary: string;
  readonly outline: ProfileOutline;
  readonly lineRateMinHz: number | null;
  readonly lineRateMaxHz: number | null;
  readonly driverSlug: string | null;
};

/** The searched columns of a document that has a title. Modes whose timing makes no raster count without a rate. */
export function searchedColumns(document: ProfileDocument): SearchedColumns {
  const modes = document.modes ?? [];
  const rates = modes.flatMap(({ timing }) =>
    timing !== undefined && rasterProblems(timing).length === 0 ? [lineRateHz(timing)] : [],
  );
  return {
    title: (document.title ?? "").trim(),
    summary: document.summary ?? "",
    outline: {
      modes: modes.slice(0, shownModes).map(({ key, name, timing }) => ({ key, name, timing })),
      modeCount: modes.length,
      slotCount: document.slots?.length ?? 0,
    },
    lineRateMinHz: rates.length === 0 ? null : Math.min(...rates),
    lineRateMaxHz: rates.length === 0 ? null : Math.max(...rates),
    driverSlug: document.madeFor?.driver?.slug ?? null,
  };
}
