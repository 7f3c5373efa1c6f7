import "server-only";
import type { BackupComparison, BackupDetail } from "@/lib/contracts/backup";
import { compareDocuments } from "@/lib/profile/compare";

function headOf({ id, deviceId, name, takenAt }: BackupDetail) {
  return { id, deviceId, name, takenAt };
}

/** What two backups say differently: neutral values by path, native settings that no document has a word for by key. */
export function compareBackups(left: BackupDetail, right: BackupDetail): BackupComparison {
  const keys = new Set([...Object.keys(left.content.values), ...Object.keys(right.content.values)]);
  const native = [...keys]
    .filter((key) => key.includes("native."))
    .sort()
    .map((key) => ({ key, left: left.content.values[key], right: right.content.values[key] }))
    .filter((change) => change.left !== change.right);
  return {
    left: headOf(left),
    right: headOf(right),
    changes: compareDocuments(left.content.document, right.content.document),
    native,
  };
}
