"use client";

import { useMemo, useState } from "react";
import { stateWords } from "@/components/drivers/driver-words";
import { useDrivers, useVersion, useVersions } from "@/components/drivers/use-drivers";
import { SelectField } from "@/components/ui/field";
import type { DriverVersionView } from "@/lib/contracts/driver";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import { parseDefinition } from "@/lib/serial/driver/parse-definition";

export type ChosenDriver = {
  readonly slug: string | null;
  readonly models: readonly { readonly value: string; readonly label: string }[];
  readonly versions: readonly DriverVersionView[];
  readonly version: string | null;
  readonly state: DriverVersionView["state"] | null;
  /** Null while it loads, and where it does not compile. */
  readonly driver: CompiledDriver | null;
  /** Why it cannot be used. */
  readonly problem: string | null;
  chooseModel(slug: string): void;
  chooseVersion(version: string): void;
};

/** A device model, and any version of its driver: drafts too, for maintainers. */
export function useChosenDriver(): ChosenDriver {
  const drivers = useDrivers().data?.pages.flatMap((page) => page.items) ?? [];
  const [wantedSlug, chooseModel] = useState<string | null>(null);
  const [wantedVersion, chooseVersion] = useState<string | null>(null);
  const slug = wantedSlug ?? drivers[0]?.slug ?? null;
  const versions = useVersions(slug ?? "", slug !== null).data?.pages.flatMap((page) => page.items) ?? [];
  const chosen = versions.find(({ version }) => version === wantedVersion) ?? versions.find(({ state }) => state === "published") ?? versions[0];
  const detail = useVersion(chosen === undefined ? null : { slug: chosen.slug, version: chosen.version });
  const parsed = useMemo(() => (detail.data === undefined ? null : parseDefinition(detail.data.definition)), [detail.data]);
  return {
    slug,
    models: drivers.map(({ slug: value, maker, model }) => ({ value, label: `${maker} ${model}` })),
    versions,
    version: chosen?.version ?? null,
    state: chosen?.state ?? null,
    driver: parsed?.ok === true ? parsed.value.driver : null,
    problem: parsed?.ok === false ? `It does not compile: ${parsed.error[0]?.path ?? ""} ${parsed.error[0]?.message ?? ""}` : null,
    chooseModel,
    chooseVersion,
  };
}

export function DriverFields({ chosen }: { readonly chosen: ChosenDriver }) {
  const { slug, models, versions, version, problem } = chosen;
  return (
    <div className="grid w-full gap-3 sm:grid-cols-2">
      <SelectField label="Model" value={slug ?? ""} onChange={(event) => chosen.chooseModel(event.target.value)} options={models} />
      <SelectField
        label="Driver version"
        value={version ?? ""}
        error={problem ?? undefined}
        onChange={(event) => chosen.chooseVersion(event.target.value)}
        options={versions.map((row) => ({ value: row.version, label: `${row.version}, ${stateWords[row.state]}` }))}
      />
    </div>
  );
}
