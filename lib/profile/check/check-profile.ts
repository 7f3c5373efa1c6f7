import type { Finding, Severity } from "@/lib/profile/finding";
import { parsePath } from "@/lib/profile/paths";
import { checkContext, type CheckContext, type CheckInput } from "./context";
import { blankingFindings } from "./blanking";
import { deviceInputFindings } from "./device-input";
import { deviceLacksFindings } from "./device-lacks";
import { deviceRangeFindings } from "./device-range";
import { deviceRasterFindings } from "./device-raster";
import { deviceTextFindings } from "./device-text";
import { firmwareFindings } from "./firmware";
import { idleFindings } from "./idle";
import { pictureFindings } from "./picture";
import { placementFindings } from "./placement";
import { rateFindings } from "./rate";
import { screenFindings } from "./screen";
import { shapeFindings } from "./shape";
import { syncFindings } from "./sync";
import { unknownFindings } from "./unknown";

/** One family of rules: what it needs to know, and what it finds. */
type RuleFamily = {
  readonly family: "shape" | "device" | "screen" | "blanking" | "placement" | "picture" | "sync" | "rate" | "unknown";
  readonly find: (context: CheckContext) => Finding[];
};

/** Every rule, in the order in which findings of one severity are told. */
const families: readonly RuleFamily[] = [
  { family: "shape", find: shapeFindings },
  { family: "screen", find: screenFindings },
  { family: "blanking", find: blankingFindings },
  { family: "placement", find: placementFindings },
  { family: "device", find: deviceRangeFindings },
  { family: "device", find: deviceRasterFindings },
  { family: "device", find: deviceTextFindings },
  { family: "device", find: deviceInputFindings },
  { family: "device", find: deviceLacksFindings },
  { family: "sync", find: syncFindings },
  { family: "picture", find: pictureFindings },
  { family: "device", find: firmwareFindings },
  { family: "screen", find: idleFindings },
  { family: "rate", find: rateFindings },
  { family: "unknown", find: unknownFindings },
];

const order: readonly Severity[] = ["stop", "caution", "note"];

/** How far a finding is softened, in severities. A mode that stays and that no slot uses says nothing new. */
function softening(finding: Finding, family: RuleFamily["family"], context: CheckContext): number {
  const path = parsePath(finding.path);
  if (path?.scope === "slot") return context.unchangedSlots.has(path.number) ? 1 : 0;
  if (path?.scope !== "mode") return 0;
  const mode = context.modes.find(({ key }) => key === path.key);
  if (!mode || mode.changedUsers.length > 0) return 0;
  const stays = context.unchangedModes.has(path.key);
  // A mode that is written although no slot uses it still has to be one that the device can hold.
  if ((family === "shape" || family === "device") && !stays) return 0;
  return stays && mode.users.length === 0 ? Number.POSITIVE_INFINITY : 1;
}

/** Slots that do not change, and modes that no changed slot uses, give cautions at most; lesser things go unsaid. */
function soften(finding: Finding, family: RuleFamily["family"], context: CheckContext): Finding[] {
  const severity = order[order.indexOf(finding.severity) + softening(finding, family, context)];
  return severity === undefined ? [] : [{ ...finding, severity }];
}

/**
 * Holds a document against itself, a device and a screen: every rule of every family.
 *
 * Pure. What is absent is not checked, or said to be unknown; with a device all rules judge the rounded values.
 * @returns findings, stops first
 */
export function checkProfile(input: CheckInput): Finding[] {
  const context = checkContext(input);
  const found = families.flatMap(({ family, find }) =>
    find(context).flatMap((finding) => soften(finding, family, context)),
  );
  return found.sort((a, b) => order.indexOf(a.severity) - order.indexOf(b.severity));
}

/** No stop among the findings. */
export function hasStop(findings: readonly Finding[]): boolean {
  return findings.some((finding) => finding.severity === "stop");
}
