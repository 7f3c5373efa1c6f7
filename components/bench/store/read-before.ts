import { z } from "zod";
import type { BenchScreen } from "@/components/bench/store/types";

type KnownScreen = Extract<BenchScreen, { kind: "known" }>;

const keysSchema = z.array(z.string()).max(200);

function storageKey(screen: KnownScreen): string {
  return `backporch.read.${screen.id ?? screen.envelope.name}`;
}

/** What nobody knows of this screen and its owner has read before: asked once a screen. */
export function readBefore(storage: Storage, screen: KnownScreen): readonly string[] {
  const text = storage.getItem(storageKey(screen));
  if (text === null) return [];
  try {
    return keysSchema.catch([]).parse(JSON.parse(text));
  } catch (error) {
    // Text that is no JSON was not written here: ask again.
    if (error instanceof SyntaxError) return [];
    throw error;
  }
}

/** Remembers the unknown limits among what was just read, or forgets them. Nothing else is read once for all. */
export function rememberRead(storage: Storage, screen: KnownScreen, keys: readonly string[], isRead: boolean): void {
  const others = readBefore(storage, screen).filter((key) => !keys.includes(key));
  const unknown = keys.filter((key) => key.startsWith("unknown."));
  storage.setItem(storageKey(screen), JSON.stringify(isRead ? [...others, ...unknown] : others));
}
