import { deviceBySlug } from "@/components/modes/store/link";
import { DEFAULT_CHOICES, type ModesChoices } from "@/components/modes/store/choices";

/** The page's own beginning, on a device whose clock steps by 50 kHz. */
export function choicesOnLf8(change: Partial<ModesChoices> = {}): ModesChoices {
  const device = deviceBySlug("lanternfield-lf8");
  if (device === undefined) throw new Error("The LF-8 is shipped");
  return { ...DEFAULT_CHOICES, device, ...change };
}
