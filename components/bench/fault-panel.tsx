"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { useBench, useBenchAccount, useBenchActions } from "@/components/bench/bench-provider";
import { faultsOf, faultWords, FIRST_CHOICE, MAX_COUNT, OPERATIONS, PLACES, ruleOf, WHENS, type FaultChoice } from "@/components/bench/fault-choices";

/** Rules at a time: each byte is shown to all of them. */
const MAX_RULES = 8;

/** A maintainer chooses what goes wrong with a simulated device, to see what the bench makes of it. */
export function FaultPanel() {
  const account = useBenchAccount();
  const isSimulated = useBench((state) => state.device?.kind === "simulated");
  const chosen = useBench((state) => state.faults);
  const { setFaults } = useBenchActions();
  const [choice, setChoice] = useState<FaultChoice>(FIRST_CHOICE);
  if (!isSimulated || (account?.role !== "maintainer" && account?.role !== "admin")) return null;
  const change = (part: Partial<FaultChoice>) => setChoice({ ...choice, ...part });
  const isWhole = Number.isInteger(choice.count) && choice.count >= 1 && choice.count <= MAX_COUNT && Number.isInteger(choice.seed);
  return (
    <details className="mt-4 border-t border-line pt-3">
      <summary className="cursor-pointer font-strong">Faults of this device and its wire</summary>
      <div className="mt-2 grid gap-x-4 gap-y-2 sm:grid-cols-2">
        <SelectField label="Where" value={choice.place} options={PLACES} onChange={(event) => changePlace(event.target.value, change)} />
        <SelectField label="What happens" value={choice.fault} options={faultsOf(choice.place).map(({ key, label }) => ({ value: key, label }))} onChange={(event) => change({ fault: event.target.value })} />
        {choice.place === "device" ? <SelectField label="At" value={choice.operation} options={OPERATIONS} onChange={(event) => change({ operation: OPERATIONS.find(({ value }) => value === event.target.value)?.value ?? "any" })} /> : null}
        <SelectField label="When" value={choice.when} options={WHENS} onChange={(event) => change({ when: WHENS.find(({ value }) => value === event.target.value)?.value ?? "once" })} />
        <TextField label={choice.place === "device" ? "Request, counted from now" : "Byte, counted from now"} type="number" min={1} max={MAX_COUNT} value={Number.isNaN(choice.count) ? "" : choice.count} error={isWhole ? undefined : `A whole number from 1 to ${MAX_COUNT}`} onChange={(event) => change({ count: event.target.valueAsNumber })} />
        {choice.when === "rate" ? <TextField label="Seed" type="number" value={Number.isNaN(choice.seed) ? "" : choice.seed} onChange={(event) => change({ seed: event.target.valueAsNumber })} /> : null}
      </div>
      <div className="mt-2.5 flex flex-wrap gap-2.5">
        <Button size="small" disabled={!isWhole || ruleOf(choice) === null || chosen.length >= MAX_RULES} onClick={() => setFaults([...chosen, choice])}>Set this fault</Button>
        <Button size="small" disabled={chosen.length === 0} onClick={() => setFaults([])}>End all faults</Button>
      </div>
      <ul aria-label="Faults that are set" aria-live="polite" className="mt-2 text-sm text-muted">
        {chosen.map((one, index) => <li key={index} className="border-t border-line py-1">{faultWords(one)}</li>)}
      </ul>
    </details>
  );
}

function changePlace(value: string, change: (part: Partial<FaultChoice>) => void): void {
  const place = PLACES.find((one) => one.value === value)?.value ?? "device-to-host";
  change({ place, fault: faultsOf(place)[0]?.key ?? "" });
}
