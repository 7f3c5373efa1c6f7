"use client";

import Link from "next/link";
import { readAttenuator, writeAttenuator } from "@/components/attenuator/attenuator-address";
import type { AttenuatorState } from "@/components/attenuator/attenuator-address";
import { AttenuatorFields } from "@/components/attenuator/attenuator-fields";
import { goalOf, workOut } from "@/components/attenuator/attenuator-form";
import type { FigureField, Outcome } from "@/components/attenuator/attenuator-form";
import { AttenuatorResult, nearestPart } from "@/components/attenuator/attenuator-result";
import { LevelChart } from "@/components/attenuator/level-chart";
import { CircuitDrawing } from "@/components/attenuator/circuit-drawing";
import { useScreenOptions } from "@/components/library/use-my-screen";
import { CautionIcon } from "@/components/ui/finding-icon";
import { PageHead } from "@/components/ui/page-head";
import { useAddress } from "@/components/ui/use-address";
import { loadVpp } from "@/lib/timing/attenuator";

/** The series resistor between a sync output and a screen. The address holds every figure. */
export function AttenuatorView() {
  const [state, change] = useAddress(readAttenuator, writeAttenuator);
  const options = useScreenOptions();
  const screen = options.find((option) => option.value === state.screen);
  const goal = goalOf(screen?.envelope ?? null);
  const outcome = workOut(state, goal);
  const { answer, figures } = outcome;
  const targetVpp = figures.targetVpp ?? goal.targetVpp;
  const loadOhm = figures.loadOhm ?? goal.loadOhm;
  return (
    <div className="gutter flex flex-1 flex-col">
      <PageHead
        title="Attenuator"
        above={
          <Link href="/screens" className="link">
            Screens
          </Link>
        }
        lead="The resistor that brings a sync output down to what a screen takes."
      />
      <div className="-mx-4 grid flex-1 grid-cols-1 border-t border-line md:-mx-7 lg:grid-cols-[400px_minmax(0,1fr)]">
        <div className="border-line px-4 py-5 max-lg:border-b md:px-7 lg:border-r">
          <AttenuatorFields state={state} outcome={outcome} goal={goal} options={options} onChange={change} />
        </div>
        <div className="grid min-w-0 grid-cols-1 content-start gap-x-10 gap-y-6 px-4 pb-10 pt-5 md:px-7 xl:grid-cols-[minmax(0,1fr)_300px]">
          <div className="min-w-0">
            <CircuitDrawing {...drawn(outcome, targetVpp, loadOhm)} />
            <div aria-live="polite" className="mt-5 border-t border-line pt-4">
              {answer === null ? (
                <p className="text-muted">{missingWords(state, outcome)}</p>
              ) : (
                <AttenuatorResult answer={answer} loadOhm={loadOhm} targetVpp={targetVpp} takesVpp={goal.takesVpp} />
              )}
            </div>
            <LevelChart loadOhm={loadOhm} targetVpp={targetVpp} />
          </div>
          <Cautions way={state.way} />
        </div>
      </div>
    </div>
  );
}

function drawn({ answer, figures }: Outcome, targetVpp: number, loadOhm: number) {
  if (answer === null) {
    const { sourceVpp, sourceOhm } = figures;
    return { sourceVpp, sourceOhm, seriesOhm: undefined, loadOhm, resultVpp: undefined };
  }
  const { sourceVpp, sourceOhm } = answer;
  const seriesOhm = nearestPart(answer, targetVpp)?.ohm ?? 0;
  return { sourceVpp, sourceOhm, seriesOhm, loadOhm, resultVpp: loadVpp(sourceVpp, sourceOhm, seriesOhm, loadOhm) };
}

const fieldWords: Readonly<Record<FigureField, string>> = {
  sourceVpp: "the level with nothing connected",
  sourceOhm: "the impedance of the source",
  firstOhm: "the first resistor",
  firstVpp: "the first level",
  secondOhm: "the second resistor",
  secondVpp: "the second level",
  readingOhm: "what the readings were terminated with",
  loadOhm: "the load",
  targetVpp: "the wanted level",
};

function missingWords(state: AttenuatorState, { missing, errors }: Outcome): string {
  if (Object.keys(errors).length > 0) return "Nothing is worked out while a figure needs another look.";
  if (state.way === "readings" && state.termination === "") return "First say what the readings were terminated with.";
  return `Still needed: ${missing.map((field) => fieldWords[field]).join(", ")}.`;
}

function Cautions({ way }: { readonly way: AttenuatorState["way"] }) {
  return (
    <aside aria-label="Before you connect" className="flex flex-col gap-4 text-sm xl:border-l xl:border-line xl:pl-6">
      <p className="flex gap-2.5">
        <CautionIcon className="mt-0.5" />
        <span>
          <strong className="block text-base">Measure first.</strong>
          Some sync outputs give logic levels of up to 5 V. That can be too strong for a television input: leave it
          unconnected until the level has been read.
        </span>
      </p>
      <p className="text-muted">
        Read peak to peak with an oscilloscope, at the end of the cable, with the load connected. A meter shows an
        average, and a sync that is short for most of the time looks far weaker on it than it is.
      </p>
      {way === "readings" ? (
        <p className="text-muted">
          Two readings, one straight and one through a resistor of about the termination’s size, tell the level and the
          impedance of the source. Both need the same termination.
        </p>
      ) : (
        <p className="text-muted">No data sheet? Take two readings instead: one straight, one through a resistor.</p>
      )}
      <p className="text-muted">
        Level at the screen = source × load ÷ (impedance + resistor + load). A screen that terminates twice, or not at
        all, has another load than its sheet says.
      </p>
    </aside>
  );
}
