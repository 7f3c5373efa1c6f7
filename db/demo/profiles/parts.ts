import type { DemoPerson } from "@/db/demo/accounts";
import { demoScreens } from "@/db/demo/screens";
import type { ExpectedSource, ProfileDocument, ProfileMode, ProfileSlot } from "@/lib/profile/document";
import type { RasterTiming } from "@/lib/timing/raster";
import { standardRaster } from "@/lib/timing/standards";
import type { StandardName } from "@/lib/timing/standards";

export type DemoRevision = {
  /** UTC. */
  readonly at: string;
  readonly note: string;
  readonly document: ProfileDocument;
};

export type DemoProfile = {
  readonly key: string;
  readonly owner: DemoPerson;
  readonly visibility: "private" | "shared";
  readonly revisions: readonly DemoRevision[];
};

export const hd: ExpectedSource = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
/** A console of 240 lines, tripled on its way here. */
export const tripled240: ExpectedSource = { ...hd, nativeRepeat: 3 };
export const console480: ExpectedSource = { activePx: 720, activeLines: 480, interlaced: false, fieldRateHz: 59.94 };
export const fullHd50: ExpectedSource = { activePx: 1920, activeLines: 1080, interlaced: false, fieldRateHz: 50 };
export const fullHd: ExpectedSource = { ...fullHd50, fieldRateHz: 60 };

type Body = Omit<ProfileDocument, "format" | "version" | "madeFor"> & {
  readonly title: string;
  /** Key of the screen that it was made for. */
  readonly screen?: string;
};

export function profile({ screen, ...body }: Body): ProfileDocument {
  const envelope = demoScreens.find(({ key }) => key === screen)?.envelope;
  return {
    format: "backporch-profile",
    version: 1,
    ...body,
    madeFor: {
      driver: { slug: "lanternfield-lf8", firmware: "3.2" },
      // The envelope's lists are read-only here and not in the document's type.
      ...(envelope === undefined ? {} : { screen: envelope as NonNullable<ProfileDocument["madeFor"]>["screen"] }),
    },
  };
}

export function mode(key: string, timing: StandardName | RasterTiming, name?: string): ProfileMode {
  if (typeof timing !== "string") return { key, name: name ?? key, timing };
  return { key, name: name ?? timing, timing: standardRaster(timing).timing };
}

export function slot(number: number, values: Omit<ProfileSlot, "number">): ProfileSlot {
  return { number, ...values };
}
