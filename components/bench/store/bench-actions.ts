import { getValue } from "@/lib/profile/paths";
import type { DocumentPatch, Remedy } from "@/lib/profile/finding";
import type { NativeWrite } from "@/lib/serial/native";
import type { SourceFormat } from "@/lib/timing/raster";
import { faultScript } from "@/lib/serial/simulator/fault-script";
import { ruleOf, type FaultChoice } from "@/components/bench/fault-choices";
import { say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { connectReal, connectSimulated, disconnect, reconnect } from "@/components/bench/store/linking";
import { backUp, readDevice } from "@/components/bench/store/reading";
import { askRecall, recallHeld } from "@/components/bench/store/recalling";
import { acknowledge, leaveOut, openReview, setCountdown, takeRemedy, withEdit, withNativeEdit } from "@/components/bench/store/review";
import { act, lookAt } from "@/components/bench/store/run-control";
import { acceptUnknownScreen, chooseScreen, forgetScreen, type ScreenChoice } from "@/components/bench/store/screens";
import { backUpAndTry } from "@/components/bench/store/try-plan";
import type { BenchTarget } from "@/components/bench/store/types";

/** Everything that a person can do on the bench, by the name of the act. */
export type BenchActions = ReturnType<typeof createBenchActions>;

function edit(core: BenchCore, patch: DocumentPatch): void {
  core.store.setState((state) => {
    const asRead = state.reading ? getValue(state.reading.content.document, patch.path) : undefined;
    return { edits: withEdit(state.edits, patch, asRead === patch.value) };
  });
}

function editNative(core: BenchCore, change: NativeWrite): void {
  core.store.setState((state) => ({ nativeEdits: withNativeEdit(state.nativeEdits, change, state.reading?.content.values[change.key] === change.value) }));
}

/** Everything changed by hand so far, as one plan. */
function reviewEdits(core: BenchCore): void {
  const { edits, nativeEdits } = core.store.getState();
  openReview(core, { kind: "edits", patches: edits, native: nativeEdits });
}

async function nameDevice(core: BenchCore, name: string): Promise<void> {
  const { device } = core.store.getState();
  if (!device?.stored) return;
  try {
    const row = await core.around.server.device(device.stored.id);
    const named = await core.around.server.changeDevice(row, { name });
    core.store.setState((state) => ({ device: state.device && { ...state.device, stored: state.device.stored && { ...state.device.stored, name: named.name } } }));
  } catch (error) {
    say(core, "halt", `The name was not stored: ${sentenceOf(error)}`);
  }
}

/** What only a simulated device lets a page do to it. */
function simulatedActions(core: BenchCore) {
  const withSimulated = (what: (simulated: NonNullable<NonNullable<BenchCore["line"]>["simulated"]>) => void) => {
    if (core.line?.simulated) what(core.line.simulated);
  };
  return {
    setSource: (source: SourceFormat | null) => { withSimulated(({ model }) => model.setSource(source)); void readDevice(core); },
    switchOffAndOn: () => withSimulated(({ model }) => model.powerCycle()),
    setFaults: (faults: readonly FaultChoice[]) => withSimulated((simulated) => {
      const script = faultScript(faults.flatMap((choice) => ruleOf(choice) ?? []));
      simulated.plug.setFault(script.wire);
      simulated.plug.release();
      simulated.model.setFault(script.device);
      core.store.setState({ faults });
    }),
    pullCable: () => withSimulated(({ plug }) => plug.unplug()),
  };
}

/** Binds the acts to one bench. */
export function createBenchActions(core: BenchCore) {
  const { store } = core;
  return {
    connectReal: (slug: string) => connectReal(core, slug),
    connectSimulated: (slug: string) => connectSimulated(core, slug),
    reconnect: () => reconnect(core),
    disconnect: () => disconnect(core),
    readAgain: () => readDevice(core),
    backUp: () => backUp(core, "by-hand"),
    cancel: () => core.abort?.abort(),
    nameDevice: (name: string) => nameDevice(core, name),
    edit: (patch: DocumentPatch) => edit(core, patch),
    editNative: (change: NativeWrite) => editNative(core, change),
    clearEdits: () => store.setState({ edits: [], nativeEdits: [] }),
    reviewEdits: () => reviewEdits(core),
    openReview: (target: BenchTarget) => openReview(core, target),
    closeReview: () => store.setState({ review: null }),
    leaveOut: (slot: number, isOut: boolean) => leaveOut(core, slot, isOut),
    acknowledge: (keys: readonly string[], isRead: boolean) => acknowledge(core, keys, isRead),
    setCountdown: (seconds: number) => setCountdown(core, seconds),
    takeRemedy: (remedy: Remedy) => takeRemedy(core, remedy),
    backUpAndTry: () => backUpAndTry(core),
    chooseScreen: (choice: ScreenChoice) => chooseScreen(core, choice),
    acceptUnknownScreen: () => acceptUnknownScreen(core),
    forgetScreen: () => forgetScreen(core),
    keep: () => void act(core, (run) => run.keep()),
    putBack: () => void act(core, (run) => run.putBack()),
    finish: () => void act(core, (run) => run.finish()),
    look: (slot: number) => void lookAt(core, slot),
    readRunAgain: () => void act(core, (run) => run.readAgain()),
    stateCycled: () => void act(core, (run) => run.stateCycled()),
    leaveRun: () => void act(core, (run) => run.leave()),
    dismissRun: () => store.setState({ run: null }),
    askRecall: (slot: number) => askRecall(core, slot),
    recallAnyway: () => recallHeld(core),
    dropRecall: () => store.setState({ heldRecall: null }),
    dismissNotice: () => store.setState({ notice: null }),
    ...simulatedActions(core),
  };
}
