"use client";

import { StopIcon } from "@/components/ui/finding-icon";
import { Button } from "@/components/ui/button";
import { formatNumber } from "@/components/ui/figures";
import { CandidateTable } from "@/components/modes/candidate-table";
import { ChangeLine } from "@/components/modes/change-line";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { followsSource, type ModesAnswer } from "@/components/modes/store/answer";
import { isStated, type StatedFigure } from "@/components/modes/store/choices";
import { figureWords } from "@/components/modes/store/figure-words";
import { blocksInOrder, clockSentences, noneFitsTitle } from "@/components/modes/words";
import { fitFindings, wayOutText } from "@/lib/profile/fit-findings";
import { capital } from "@/lib/profile/words";
import type { FitConstraint } from "@/lib/timing/fit/fit-types";

/** Whether the wish fits, or why not; the rasters to choose from; what the clock can do. */
export function MiddleColumn() {
  const answer = useModes((state) => state.answer);
  const follows = useModes((state) => followsSource(state.choices));
  const hasErrors = useModes((state) => Object.keys(state.errors).length > 0);
  if (answer === null)
    return <div className="gutter py-6 text-muted">{hasErrors ? <ChangeLine /> : "Getting the screen…"}</div>;
  const { hand, clock, request } = answer;
  return (
    <section aria-labelledby="answer-head" className="gutter min-w-0 py-4 lg:px-7">
      <div aria-live="polite">
        {answer.outcome.fits.length > 0 ? <Fits answer={answer} /> : <NoneFits answer={answer} />}
      </div>
      <ChangeLine />
      <CandidateTable />
      {hand === null || clock === null ? null : (
        <p className="mt-5 max-w-[68ch] text-muted">
          {clockSentences(hand.timing, clock, request.wish.fieldRateHz, follows).join(" ")}
        </p>
      )}
    </section>
  );
}

function Fits({ answer: { request, outcome } }: { readonly answer: ModesAnswer }) {
  const { wish } = request;
  const count = outcome.fits.length;
  return (
    <div className="mb-2">
      <h2 id="answer-head" className="text-xl">
        {formatNumber(wish.activeLines)} lines{wish.interlaced ? " interlaced" : ""} at {formatNumber(wish.fieldRateHz)}{" "}
        Hz fit.
      </h2>
      <p className="text-muted">
        {count === 1 ? "One raster holds" : `The best ${count} rasters hold`} to every limit that is known, nearest to
        the refresh first, then to the standards’ porches.
      </p>
    </div>
  );
}

/** Figures that the wish states of its own: letting one go may be the way out. */
const wishedBy: Readonly<Partial<Record<FitConstraint, StatedFigure>>> = {
  "wish-clock": "pixelClockHz",
  "wish-line-rate": "lineRateHz",
  "wish-line-total": "lineTotal",
  "wish-field-lines": "fieldLines",
};

function NoneFits({ answer }: { readonly answer: ModesAnswer }) {
  const { outcome, request } = answer;
  const { keep } = useModesActs();
  const sources = new Map(fitFindings(request, outcome).map(({ measured, limitSource }) => [measured, limitSource]));
  const blocks = blocksInOrder(outcome.blockedBy);
  const loose = blocks.flatMap(({ constraint }) => wishedBy[constraint] ?? []).filter(isStated);
  const way = wayOutText(request, outcome);
  return (
    <div className="mb-3 flex gap-2.5" data-none-fits>
      <StopIcon className="mt-1 size-[18px]" />
      <div className="min-w-0">
        <h2 id="answer-head" className="text-xl text-halt">
          <span className="sr-only">Stop: </span>
          {noneFitsTitle(answer)}
        </h2>
        <ul className="max-w-[68ch] text-muted">
          {blocks.map(({ constraint, sentence, needed }) => {
            const from = sources.get(needed);
            return (
              <li key={constraint}>
                {capital(sentence)} {from === undefined ? null : <span className="text-sm">(limit from: {from})</span>}
              </li>
            );
          })}
        </ul>
        <p className="max-w-[68ch]">
          {blocks.length > 1 && !blocks[0]?.alone ? "These are in the way together. " : null}
          {way === undefined ? "Nothing near it fits either." : `${capital(way)}. What it can do instead:`}
        </p>
        {loose.length === 0 ? null : (
          <div className="mt-2 flex flex-wrap gap-2.5">
            {loose.map((figure) => (
              <Button key={figure} size="small" onClick={() => keep(figure, false)}>
                Let {figureWords[figure].inSentence} go
              </Button>
            ))}
          </div>
        )}
      </div>
    </div>
  );
}
