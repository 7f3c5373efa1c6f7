import * as account from "@/app/api/account/route";
import * as accountPassword from "@/app/api/account/password/route";
import * as backupsId from "@/app/api/backups/[id]/route";
import * as backupsIdCompare from "@/app/api/backups/[id]/compare/route";
import * as backupsIdKnownGood from "@/app/api/backups/[id]/known-good/route";
import * as backupsIdUndelete from "@/app/api/backups/[id]/undelete/route";
import * as devices from "@/app/api/devices/route";
import * as devicesId from "@/app/api/devices/[id]/route";
import * as devicesIdBackups from "@/app/api/devices/[id]/backups/route";
import * as conformance from "@/app/api/conformance/route";
import * as conformanceId from "@/app/api/conformance/[id]/route";
import * as devicesIdDriver from "@/app/api/devices/[id]/driver/route";
import * as devicesIdDriverNotice from "@/app/api/devices/[id]/driver-notice/route";
import * as driverNotices from "@/app/api/driver-notices/route";
import * as driverQuestionsIdAnswer from "@/app/api/driver-questions/[id]/answer/route";
import * as drivers from "@/app/api/drivers/route";
import * as driversImport from "@/app/api/drivers/import/route";
import * as driversSlugQuestions from "@/app/api/drivers/[slug]/questions/route";
import * as driversSlugVersions from "@/app/api/drivers/[slug]/versions/route";
import * as driversSlugVersionsVersion from "@/app/api/drivers/[slug]/versions/[version]/route";
import * as driversSlugVersionsVersionComparison from "@/app/api/drivers/[slug]/versions/[version]/comparison/route";
import * as driversSlugVersionsVersionExport from "@/app/api/drivers/[slug]/versions/[version]/export/route";
import * as driversSlugVersionsVersionPublication from "@/app/api/drivers/[slug]/versions/[version]/publication/route";
import * as driversSlugVersionsVersionWithdrawal from "@/app/api/drivers/[slug]/versions/[version]/withdrawal/route";
import * as recordings from "@/app/api/recordings/route";
import * as recordingsId from "@/app/api/recordings/[id]/route";
import * as recordingsIdFile from "@/app/api/recordings/[id]/file/route";
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
import * as screensEdid from "@/app/api/screens/edid/route";
import * as sessions from "@/app/api/sessions/route";
import * as sessionsId from "@/app/api/sessions/[id]/route";
import * as sessionsCurrent from "@/app/api/sessions/current/route";
import * as signalAttenuator from "@/app/api/signal/attenuator/route";
import * as timingDescribe from "@/app/api/timing/describe/route";
import * as timingFit from "@/app/api/timing/fit/route";
import * as timingModeline from "@/app/api/timing/modeline/route";
import * as timingStandards from "@/app/api/timing/standards/route";
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
  "/api/conformance": conformance,
  "/api/conformance/{id}": conformanceId,
  "/api/devices/{id}/driver": devicesIdDriver,
  "/api/devices/{id}/driver-notice": devicesIdDriverNotice,
  "/api/driver-notices": driverNotices,
  "/api/driver-questions/{id}/answer": driverQuestionsIdAnswer,
  "/api/drivers": drivers,
  "/api/drivers/import": driversImport,
  "/api/drivers/{slug}/questions": driversSlugQuestions,
  "/api/drivers/{slug}/versions": driversSlugVersions,
  "/api/drivers/{slug}/versions/{version}": driversSlugVersionsVersion,
  "/api/drivers/{slug}/versions/{version}/comparison": driversSlugVersionsVersionComparison,
  "/api/drivers/{slug}/versions/{version}/export": driversSlugVersionsVersionExport,
  "/api/drivers/{slug}/versions/{version}/publication": driversSlugVersionsVersionPublication,
  "/api/drivers/{slug}/versions/{version}/withdrawal": driversSlugVersionsVersionWithdrawal,
  "/api/recordings": recordings,
  "/api/recordings/{id}": recordingsId,
  "/api/recordings/{id}/file": recordingsIdFile,
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
  "/api/screens/edid": screensEdid,
  "/api/sessions": sessions,
  "/api/sessions/{id}": sessionsId,
  "/api/sessions/current": sessionsCurrent,
  "/api/signal/attenuator": signalAttenuator,
  "/api/timing/describe": timingDescribe,
  "/api/timing/fit": timingFit,
  "/api/timing/modeline": timingModeline,
  "/api/timing/standards": timingStandards,
};
