"use client";

import { Checkbox } from "@/components/ui/checkbox";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { isKept, type KeptFigure, type StatedFigure } from "@/components/modes/store/choices";
import { figureWords } from "@/components/modes/store/figure-words";

/** The lock of a figure: what is kept may not change with another. */
export function KeepBox({ figure }: { readonly figure: KeptFigure | StatedFigure }) {
  const isOn = useModes((state) => isKept(state.choices, figure));
  const { keep } = useModesActs();
  const name = figure === "interlaced" ? "the scan" : figureWords[figure].inSentence;
  return (
    <span className="text-sm text-muted">
      <Checkbox
        checked={isOn}
        onChange={(checked) => keep(figure, checked)}
        label={
          <>
            keep<span className="sr-only"> {name}</span>
          </>
        }
      />
    </span>
  );
}
