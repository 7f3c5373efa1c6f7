import type { EnvelopeLimit, ScreenEnvelope } from "@/lib/timing/envelope";
import type { DeviceLimits } from "@/lib/profile/limits";
import type { Finding } from "@/lib/profile/finding";
import type { CheckContext } from "./context";

type Limit = { readonly limit: EnvelopeLimit; readonly name: string };

const damage = "A signal above or below a CRT's range can damage it.";

function unknown(rule: string, path: string, sentence: string, detail?: string): Finding {
  return { rule, path, severity: "caution", sentence, detail, slots: [], remedies: [] };
}

/** The limits that this document needs to be held against. */
function neededLimits(context: CheckContext): Limit[] {
  const judged = context.modes.filter((mode) => mode.timing && mode.changedUsers.length > 0);
  const changed = context.slots.filter(({ number }) => !context.unchangedSlots.has(number));
  const raster: Limit[] = [
    { limit: "maxPixelClockHz", name: "pixel clock" },
    { limit: "minSyncUs", name: "shortest sync" },
    { limit: "minBackPorchUs", name: "shortest back porch" },
    { limit: "minFieldBlankUs", name: "shortest field blanking" },
  ];
  const interlaced = judged.some((mode) => mode.timing?.interlaced === true);
  const kinds = changed.some(({ slot }) => slot.syncKind !== undefined);
  const placed = changed.some(({ slot }) => slot.placement !== undefined);
  const aspect = context.document.madeFor?.screen?.aspect !== undefined;
  return [
    ...(judged.length > 0 ? raster : []),
    ...(interlaced ? [{ limit: "interlace", name: "interlace" } as const] : []),
    ...(kinds
      ? [{ limit: "syncKinds", name: "sync kinds" } as const, { limit: "syncVpp", name: "sync level" } as const]
      : []),
    ...(aspect ? [{ limit: "aspect", name: "shape" } as const] : []),
    ...(placed ? [{ limit: "visiblePct", name: "visible part" } as const] : []),
  ];
}

function ofScreen(context: CheckContext, screen: ScreenEnvelope): Finding[] {
  const limits = neededLimits(context);
  const bands = screen.bands.length === 0 && limits.length > 0;
  const missing = limits.filter(({ limit }) => screen[limit] === undefined);
  return [
    ...(bands
      ? [
          unknown(
            "unknown.screen",
            "screen.bands",
            "Nothing is known about this screen's line and field rates, so they were not checked.",
            damage,
          ),
        ]
      : []),
    ...missing.map(({ limit, name }) =>
      unknown(
        "unknown.screen",
        `screen.${limit}`,
        `Nothing is known about this screen's ${name}, so that was not checked.`,
        limit === "maxPixelClockHz" ? damage : undefined,
      ),
    ),
  ];
}

function ofDevice(context: CheckContext, device: DeviceLimits): Finding[] {
  const changed = context.slots.filter(({ number }) => !context.unchangedSlots.has(number));
  const kinds = new Set(changed.flatMap(({ slot }) => slot.syncKind ?? []));
  const levels = device.syncOutputs.filter(({ kind, vpp }) => vpp === undefined && kinds.has(kind));
  return [
    ...levels.map(({ kind }) =>
      unknown(
        "unknown.device",
        `device.syncOutputs.${kind}`,
        `Nobody knows how strong this device's ${kind} sync is, so that was not checked.`,
        "Measure it before it goes to a screen.",
      ),
    ),
    ...(device.firmware.running === undefined
      ? [
          unknown(
            "unknown.device",
            "device.firmware",
            "The device does not say which firmware runs, so that was not checked.",
          ),
        ]
      : []),
  ];
}

/** `unknown`: limits of the screen or the device that nobody stated. Acknowledged once a screen: the path names the limit. */
export function unknownFindings(context: CheckContext): Finding[] {
  const { screen, device } = context;
  return [
    ...(screen
      ? ofScreen(context, screen)
      : [unknown("unknown.screen", "screen", "No screen is named, so nothing was checked against one.", damage)]),
    ...(device ? ofDevice(context, device) : []),
  ];
}
