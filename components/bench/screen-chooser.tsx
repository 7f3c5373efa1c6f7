"use client";

import { useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { SelectField } from "@/components/ui/field";
import { useBench, useBenchActions } from "@/components/bench/bench-provider";
import { useScreenChoices } from "@/components/bench/use-screen-choices";
import type { ScreenChoice } from "@/components/bench/store/screens";
import type { BenchScreen } from "@/components/bench/store/types";

const NONE = "none";
const UNKNOWN = "unknown";

function keyOf(screen: BenchScreen): string {
  if (screen.kind === "none") return NONE;
  return screen.kind === "accepted-unknown" ? UNKNOWN : (screen.id ?? `name:${screen.envelope.name}`);
}

/** The choice that was made. A class of screens that has just become the owner's is not among their own until the list comes anew. */
function choiceOf(choices: readonly ScreenChoice[], { id, envelope }: Extract<BenchScreen, { kind: "known" }>): ScreenChoice | undefined {
  return choices.find((choice) => id !== null && choice.id === id) ?? choices.find((choice) => choice.envelope.name === envelope.name);
}

/** Which screen the signal goes to: everything is checked against it. */
export function ScreenChooser() {
  const choices = useScreenChoices();
  const screen = useBench((state) => state.screen);
  const isRunning = useBench((state) => state.activity === "running");
  const { chooseScreen, acceptUnknownScreen, forgetScreen } = useBenchActions();
  const current = screen.kind === "known" ? choiceOf(choices, screen) : undefined;
  const client = useQueryClient();
  const choose = (key: string) => {
    const choice = choices.find((one) => one.key === key);
    if (choice) void chooseScreen(choice).then(() => client.invalidateQueries({ queryKey: ["screens"] }));
    else if (key === UNKNOWN) acceptUnknownScreen();
    else forgetScreen();
  };
  return (
    <SelectField
      label="Screen" disabled={isRunning} value={current?.key ?? keyOf(screen)} onChange={(event) => choose(event.target.value)}
      aside={<Link className="link" href="/screens">Screens</Link>}
      options={[
        { value: NONE, label: "Not chosen" },
        ...choices.map(({ key, label }) => ({ value: key, label })),
        { value: UNKNOWN, label: "Unknown, and I accept that" },
      ]}
    />
  );
}
