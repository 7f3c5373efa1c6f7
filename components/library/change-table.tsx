import { formatSetting } from "@/components/bench/format-value";
import { settingName } from "@/components/bench/setting-name";
import { ChangedRing } from "@/components/ui/finding-icon";
import { neutralSetting } from "@/lib/profile/neutral-settings";
import { patternOf } from "@/lib/profile/paths";

export type Change = {
  readonly path: string;
  readonly left?: unknown;
  readonly right?: unknown;
  readonly unit?: string | undefined;
};

/** A value of a document as it stands on screen. */
export function changeText(path: string, value: unknown, unit: string | undefined): string {
  const pattern = patternOf(path) ?? path;
  return formatSetting(value, neutralSetting(pattern) ?? { pattern, unit: unit ?? "" }, unit);
}

export type ChangeTableProps = {
  readonly caption: string;
  readonly leftName: string;
  readonly rightName: string;
  readonly changes: readonly Change[];
};

/** What differs between two documents, in the document's order. */
export function ChangeTable({ caption, leftName, rightName, changes }: ChangeTableProps) {
  return (
    <table className="w-full border-collapse">
      <caption className="sr-only">{caption}</caption>
      <thead>
        <tr className="border-b border-line text-left text-sm text-muted">
          <th scope="col" className="py-1.5 pr-4 font-[500]">
            Value
          </th>
          <th scope="col" className="w-1/4 break-words py-1.5 pr-4 font-[500]">
            {leftName}
          </th>
          <th scope="col" className="w-1/4 break-words py-1.5 font-[500]">
            {rightName}
          </th>
        </tr>
      </thead>
      <tbody>
        {changes.map((change) => (
          <tr key={change.path} className="border-b border-line align-baseline">
            <th scope="row" className="py-1.5 pr-4 text-left font-normal">
              <ChangedRing className="mr-2" />
              {settingName(change.path)}
            </th>
            <td className="figure break-words py-1.5 pr-4 text-muted">
              {changeText(change.path, change.left, change.unit)}
            </td>
            <td className="figure break-words py-1.5">{changeText(change.path, change.right, change.unit)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
