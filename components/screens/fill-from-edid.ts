import { edidNotes } from "@/components/screens/edid-file";
import type { EdidView } from "@/components/screens/edid-file";
import { formFromEnvelope } from "@/components/screens/screen-form";
import type { ScreenForm } from "@/components/screens/screen-form";

/** Longest notes that a screen keeps. */
const LONGEST_NOTES = 2000;

/**
 * A form with the limits that an EDID states, each with "EDID" as its source. What an EDID cannot know (blanking, sync
 * level, what the frame hides), a name and notes stay as they were typed.
 */
export function fillFromEdid(form: ScreenForm, edid: EdidView): ScreenForm {
  const stated = formFromEnvelope(edid.screen, edidNotes(edid));
  const has = (limit: keyof EdidView["screen"]) => edid.screen[limit] !== undefined;
  const notes = [form.notes.trim(), stated.notes].filter((text) => text !== "").join("\n");
  const { bands: _bands, ...otherSources } = form.sources;
  return {
    ...form,
    name: form.name.trim() === "" ? stated.name : form.name,
    notes: notes.slice(0, LONGEST_NOTES),
    // Rates are the point of an EDID: one that states none leaves none, not those of another screen.
    bands: stated.bands,
    interlace: has("interlace") ? stated.interlace : form.interlace,
    maxPixelClockMhz: has("maxPixelClockHz") ? stated.maxPixelClockMhz : form.maxPixelClockMhz,
    syncKinds: has("syncKinds") ? stated.syncKinds : form.syncKinds,
    aspect: has("aspect") ? stated.aspect : form.aspect,
    sources: { ...otherSources, ...stated.sources },
  };
}
