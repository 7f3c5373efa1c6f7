"use client";

import { Button } from "@/components/ui/button";
import { CautionIcon, ChangedRing } from "@/components/ui/finding-icon";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { figureWithUnit, figureWords } from "@/components/modes/store/figure-words";
import { changeInWords, figuresInWords } from "@/components/modes/words";
import { capital, listText } from "@/lib/profile/words";

/** Changes told by name; more than these are a new raster, which the page shows whole. */
const MOST_TOLD = 6;

/** What the last figure took with it, or what is kept and stands in its way. */
export function ChangeLine() {
  const refusal = useModes((state) => state.refusal);
  const note = useModes((state) => state.note);
  const errors = useModes((state) => state.errors);
  const { letGoAndTurn, undo, dismiss } = useModesActs();
  // What belongs to a field stands under the field.
  const others = Object.entries(errors).filter(([path]) => !(path in figureWords));
  if (others.length > 0)
    return (
      <ul role="alert" className="border-l-3 my-2 border-halt py-1 pl-3">
        {others.map(([path, message]) => (
          <li key={path}>This was not taken. {message}</li>
        ))}
      </ul>
    );
  if (refusal !== null) {
    const { figure, value, by } = refusal;
    return (
      <div role="alert" className="border-l-3 my-2 border-halt bg-surface py-2 pl-3 pr-2">
        <p className="flex gap-2">
          <CautionIcon className="mt-[3px]" />
          <span>
            {capital(figureWords[figure].inSentence)} of {figureWithUnit(figure, value)} would change{" "}
            {figuresInWords(by)}, which you keep. Nothing was changed.
          </span>
        </p>
        <div className="mt-1.5 flex flex-wrap gap-2.5">
          <Button size="small" onClick={() => letGoAndTurn(refusal)}>
            Let {figuresInWords(by)} go
          </Button>
          <Button size="small" kind="quiet" onClick={dismiss}>
            Leave it
          </Button>
        </div>
      </div>
    );
  }
  if (note === null) return null;
  const told = note.others.slice(0, MOST_TOLD).map(({ figure, from, to }) => changeInWords(figure, from, to));
  const rest = note.others.length - told.length;
  const words = listText(rest === 0 ? told : [...told, `${rest} more`]);
  return (
    <div
      role="status"
      className="my-2 flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1 border-y border-line py-1.5 text-sm"
    >
      <p className="min-w-0 flex-1">
        <ChangedRing className="mr-2" />
        <span className="font-strong">Changed with it:</span> <span className="text-muted">{words}.</span>
      </p>
      <Button size="small" kind="quiet" onClick={undo}>
        Take it back
      </Button>
    </div>
  );
}
