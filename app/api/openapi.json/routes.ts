import * as account from "@/app/api/account/route";
import * as accountPassword from "@/app/api/account/password/route";
import * as backupsId from "@/app/api/backups/[id]/route";
import * as backupsIdCompare from "@/app/api/backups/[id]/compare/route";
import * as backupsIdKnownGood from "@/app/api/backups/[id]/known-good/route";
import * as backupsIdUndelete from "@/app/api/backups/[id]/undelete/route";
import * as devices from "@/app/api/devices/route";
import * as devicesId from "@/app/api/devices/[id]/route";
import * as devicesIdBackups from "@/app/api/devices/[id]/backups/route";
import * as health from "@/app/api/health/route";
import * as plans from "@/app/api/plans/route";
import * as plansId from "@/app/api/plans/[id]/route";
import * as profiles from "@/app/api/profiles/route";
import * as profilesId from "@/app/api/profiles/[id]/route";
import * as profilesIdExport from "@/app/api/profiles/[id]/export/route";
import * as profilesIdRevisions from "@/app/api/profiles/[id]/revisions/route";
import * as profilesIdRevisionsNumber from "@/app/api/profiles/[id]/revisions/[number]/route";
import * as profilesCheck from "@/app/api/profiles/check/route";
import * as profilesCompare from "@/app/api/profiles/compare/route";
import * as profilesConvert from "@/app/api/profiles/convert/route";
import * as profilesImport from "@/app/api/profiles/import/route";
import * as runs from "@/app/api/runs/route";
import * as runsId from "@/app/api/runs/[id]/route";
import * as runsIdClosing from "@/app/api/runs/[id]/closing/route";
import * as runsIdHolder from "@/app/api/runs/[id]/holder/route";
import * as runsIdSteps from "@/app/api/runs/[id]/steps/route";
import * as screens from "@/app/api/screens/route";
import * as screensId from "@/app/api/screens/[id]/route";
import * as sessions from "@/app/api/sessions/route";
import * as sessionsId from "@/app/api/sessions/[id]/route";
import * as sessionsCurrent from "@/app/api/sessions/current/route";
import * as timingDescribe from "@/app/api/timing/describe/route";
import type { RouteModules } from "@/app/api/_http/openapi";

/** Every route file of the API by its path in the address; a test compares the list with the folder. */
export const routeModules: RouteModules = {
  "/api/account": account,
  "/api/account/password": accountPassword,
  "/api/backups/{id}": backupsId,
  "/api/backups/{id}/compare": backupsIdCompare,
  "/api/backups/{id}/known-good": backupsIdKnownGood,
  "/api/backups/{id}/undelete": backupsIdUndelete,
  "/api/devices": devices,
  "/api/devices/{id}": devicesId,
  "/api/devices/{id}/backups": devicesIdBackups,
  "/api/health": health,
  "/api/plans": plans,
  "/api/plans/{id}": plansId,
  "/api/profiles": profiles,
  "/api/profiles/{id}": profilesId,
  "/api/profiles/{id}/export": profilesIdExport,
  "/api/profiles/{id}/revisions": profilesIdRevisions,
  "/api/profiles/{id}/revisions/{number}": profilesIdRevisionsNumber,
  "/api/profiles/check": profilesCheck,
  "/api/profiles/compare": profilesCompare,
  "/api/profiles/convert": profilesConvert,
  "/api/profiles/import": profilesImport,
  "/api/runs": runs,
  "/api/runs/{id}": runsId,
  "/api/runs/{id}/closing": runsIdClosing,
  "/api/runs/{id}/holder": runsIdHolder,
  "/api/runs/{id}/steps": runsIdSteps,
  "/api/screens": screens,
  "/api/screens/{id}": screensId,
  "/api/sessions": sessions,
  "/api/sessions/{id}": sessionsId,
  "/api/sessions/current": sessionsCurrent,
  "/api/timing/describe": timingDescribe,
};
