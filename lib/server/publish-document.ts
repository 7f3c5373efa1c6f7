import "server-only";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { ProfileDocument } from "@/lib/profile/document";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

export type Publication = {
  readonly slots: readonly number[];
  readonly title: string;
  readonly summary: string;
  readonly notes: string;
};

/**
 * A profile of some slots of a backup, with the modes that they use and the trim that acts everywhere.
 *
 * The slot at switch-on stays out: it is a choice of one device's owner, not of a picture.
 * @param screen what the device stands before, as what the profile was made for
 * Error: "no-slot" when the backup has no mode in one of the slots.
 */
export function publishDocument(
  { content, firmware }: Pick<BackupDetail, "content" | "firmware">,
  { slots: wanted, title, summary, notes }: Publication,
  screen: ScreenEnvelope | null,
): Result<ProfileDocument, "no-slot"> {
  const { document } = content;
  const slots = (document.slots ?? []).filter(({ number, mode }) => wanted.includes(number) && mode !== undefined);
  if (slots.length !== new Set(wanted).size) return fail("no-slot");
  const used = new Set(slots.map(({ mode }) => mode));
  const trim = document.everywhere?.trim;
  return ok({
    format: document.format,
    version: document.version,
    title,
    ...(summary === "" ? {} : { summary }),
    ...(notes === "" ? {} : { notes }),
    madeFor: {
      driver: { slug: content.driver.slug, firmware },
      // The same shape, but for lists that the document's schema may change and the envelope's type may not.
      ...(screen === null ? {} : { screen: screen as NonNullable<ProfileDocument["madeFor"]>["screen"] }),
    },
    ...(trim === undefined ? {} : { everywhere: { trim } }),
    modes: (document.modes ?? []).filter(({ key }) => used.has(key)),
    slots,
  });
}
