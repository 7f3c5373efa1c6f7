import type { DemoPerson } from "@/db/demo/accounts";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import type { DriverDefinition } from "@/lib/serial/driver/definition";

export type DemoRecording = {
  readonly key: string;
  readonly owner: DemoPerson;
  /** Key of the demo's device that it was recorded from, as its last backup says that it is. */
  readonly device: string;
  readonly name: string;
  /** UTC. */
  readonly at: string;
  /** Slots that are made active after everything was read. */
  readonly slots: readonly number[];
};

/** Recordings of simulated devices: they show the form, and speak for no hardware. */
export const demoRecordings: readonly DemoRecording[] = [
  {
    key: "cabinet-a-evening",
    owner: "imke",
    device: "cabinet-a",
    name: "Cabinet A, everything read, two slots (simulated)",
    at: "2026-10-02T18:40:00Z",
    slots: [2, 1],
  },
  {
    key: "gallery-1-weekly",
    owner: "imke",
    device: "gallery-1",
    name: "Gallery 1, weekly backup (simulated)",
    at: "2026-10-19T08:05:00Z",
    slots: [1],
  },
  {
    key: "store-delivery",
    owner: "imke",
    device: "store",
    name: "Ternwick 16 in the store, as delivered (simulated)",
    at: "2026-11-03T10:20:00Z",
    slots: [],
  },
];

export type DemoQuestion = {
  readonly key: string;
  readonly asker: DemoPerson;
  readonly slug: string;
  readonly text: string;
  readonly recording?: string;
  readonly answer?: string;
};

export const demoQuestions: readonly DemoQuestion[] = [
  {
    key: "width-steps",
    asker: "imke",
    slug: "lanternfield-lf8",
    text: "The width that I set to 95.0 % comes back as 95.2 %. Is that the device or the driver? The recording is of an evening when it did.",
    recording: "cabinet-a-evening",
    answer:
      "The device: it has steps of 0.4 %, counted from 80 %. The driver states that step, so the review shows 95.2 % before anything is written.",
  },
  {
    key: "count-of-starts",
    asker: "imke",
    slug: "ternwick-16",
    text: "Could the driver read how often the device was started? Ours restarts by itself now and then, and the backup does not say so.",
    recording: "store-delivery",
  },
];

/** A text with one part of it replaced; the part has to be there. */
function replaced(text: string, part: string, by: string): string {
  if (!text.includes(part)) throw new Error(`The shipped driver no longer has ${part}`);
  return text.replace(part, by);
}

/**
 * A draft that is wrong in two ways: it asks for the horizontal position by another word, which a device made from the very same
 * draft understands, and only a recording refutes; and it gives a slot more modes than there are.
 */
function draftOfLf8(): DriverDefinition {
  const text = JSON.stringify({ ...lanternfieldLf8, version: "1.1.0" });
  const renamed = text.replaceAll(":HPOS", ":HOFFS");
  const modes = '"key":"slots[*].mode","label":"Output mode","value":{"type":"integer","min":0,"max":';
  // The shipped definition is data, and this is it with two texts changed.
  return JSON.parse(replaced(renamed, `${modes}32`, `${modes}40`)) as DriverDefinition;
}

export const demoDraft = {
  author: "maren",
  note: "Tries the words of the new command list for firmware 3.4. Not for use: the recording from the archive speaks against it.",
  definition: draftOfLf8(),
} as const;
