import type { Clock } from "@/lib/serial/clock";

type TimelineEvent = {
  readonly dueMs: number;
  readonly fire: () => void;
  /** Takes the timer of the clock beneath back; null: the run that is under way comes to this event by itself. */
  disarm: (() => void) | null;
};

/** Events in the order in which they fire: by moment, then by when they were set. The last ones are the likely place. */
function insert(events: TimelineEvent[], event: TimelineEvent): void {
  let at = events.length;
  for (let before = events[at - 1]; before && before.dueMs > event.dueMs; before = events[at - 1]) at -= 1;
  events.splice(at, 0, event);
}

/**
 * The time of something simulated, over a clock whose timers may come late (a browser makes nested ones 4 ms long, a hidden tab
 * fires them 1 s apart): events happen in the order in which they are due, and each takes place at the moment it was due.
 *
 * When a timer of the clock beneath fires late, everything that is due by then happens in that turn, what the events themselves
 * lead to included. During an event `nowMs()` and `wallMs()` say its own moment, so a chain of stages keeps its pace however
 * coarse the timers are; outside of events they say the clock's, so what comes from outside enters at the real moment. Hence
 * `nowMs()` steps back from the one to the other, and never within either. No event happens before the clock's own time for it.
 *
 * Over a clock that is never late (a virtual one) it does what that clock does: an event is a timer of it, set and fired where
 * it would be without this. Not for what promises to happen in a later turn: a wait of 0 set by a late event ends in the same turn.
 *
 * An event that throws ends the turn with its error; the others stay due and come next.
 */
export function createTimeline(clock: Clock): Clock {
  const events: TimelineEvent[] = [];
  /** Moment of the event that happens; null: none does. */
  let eventMs: number | null = null;
  /** Whether an event of that moment is due in the turn that is under way. */
  let isOverdue = (_dueMs: number): boolean => false;

  const nowMs = (): number => eventMs ?? clock.nowMs();

  function arm(event: TimelineEvent, waitMs: number): void {
    event.disarm = clock.after(waitMs, () => {
      event.disarm = null;
      turn(event);
    });
  }

  function remove(event: TimelineEvent): void {
    event.disarm?.();
    event.disarm = null;
    const at = events.indexOf(event);
    if (at !== -1) events.splice(at, 1);
  }

  /** What happens next: whatever is overdue, then the one whose timer fired. */
  function nextOf(fired: TimelineEvent): TimelineEvent | undefined {
    const first = events[0];
    return first && (first === fired || isOverdue(first.dueMs)) ? first : undefined;
  }

  function turn(fired: TimelineEvent): void {
    const untilMs = clock.nowMs();
    const isLate = fired.dueMs < untilMs;
    // Where the timer is on time, others of the very moment have theirs, and come in turns of their own.
    isOverdue = (dueMs) => (isLate ? dueMs <= untilMs : dueMs < untilMs);
    try {
      for (let event = nextOf(fired); event; event = nextOf(fired)) {
        remove(event);
        eventMs = event.dueMs;
        event.fire();
      }
    } finally {
      eventMs = null;
      isOverdue = () => false;
      // What an error has kept from happening in this turn.
      for (const event of events) if (!event.disarm) arm(event, Math.max(0, event.dueMs - clock.nowMs()));
    }
  }

  return {
    nowMs,
    wallMs: () => clock.wallMs() - (eventMs === null ? 0 : clock.nowMs() - eventMs),
    after(ms, fire) {
      const atMs = nowMs();
      const waitMs = Math.max(0, ms);
      const event: TimelineEvent = { dueMs: atMs + waitMs, fire, disarm: null };
      insert(events, event);
      if (!isOverdue(event.dueMs)) {
        // The wait as it was given where that can be: a difference of sums would round.
        const clockMs = clock.nowMs();
        arm(event, clockMs === atMs ? waitMs : Math.max(0, event.dueMs - clockMs));
      }
      return () => remove(event);
    },
  };
}
