"use client";

import { settingName } from "@/components/bench/setting-name";
import { useBench } from "@/components/bench/bench-provider";
import type { SettingStanding } from "@/lib/serial/run/types";

const WORDS: Record<SettingStanding["standing"], string> = { old: "old", new: "new", other: "another value", unknown: "unknown" };

/** How each setting stands when a run could reach neither side. */
export function StandingTable({ standings }: { readonly standings: readonly SettingStanding[] }) {
  const driver = useBench((state) => state.device?.driver);
  return (
    <div className="mt-3 max-h-64 overflow-y-auto">
      <table className="w-full text-left">
        <caption className="sr-only">How each setting stands</caption>
        <thead className="text-sm text-muted">
          <tr><th scope="col" className="py-1 pr-4 font-[500]">Setting</th><th scope="col" className="pr-4 font-[500]">Old</th><th scope="col" className="pr-4 font-[500]">New</th><th scope="col" className="pr-4 font-[500]">Found</th><th scope="col" className="font-[500]">It is</th></tr>
        </thead>
        <tbody>
          {standings.map((one) => (
            <tr key={one.key} className="border-t border-line">
              <th scope="row" className="py-1 pr-4 font-[400]">{settingName(one.key, driver)}</th>
              <td className="figure pr-4">{one.old}</td><td className="figure pr-4">{one.new}</td><td className="figure pr-4">{one.found ?? "–"}</td>
              <td className="font-strong">{WORDS[one.standing]}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
