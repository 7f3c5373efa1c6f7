/**
 * Events that go from a port up to the object it belongs to, as they do between `SerialPort` and `Serial`.
 *
 * A platform's own EventTarget made by a script has no parent, so the dispatch is done here: capture from the top down,
 * the target, then bubbling. Source: DOM Standard, "dispatch"; WICG/serial gives SerialPort's parent as Serial.
 */
type Entry = {
  readonly type: string;
  readonly callback: EventListenerOrEventListenerObject;
  readonly capture: boolean;
  readonly once: boolean;
  removed: boolean;
};

type Step = { readonly target: EventTree; readonly phase: 1 | 2 | 3 };

function isCapture(options: boolean | EventListenerOptions | undefined): boolean {
  return typeof options === "boolean" ? options : options?.capture === true;
}

/** What a listener may ask of an event on its way; the platform's own slots know only its own dispatch. */
class Passage {
  current: Step | null = null;
  stopped = false;
  stoppedAtOnce = false;
  readonly path: readonly EventTree[];
  readonly #event: Event;

  constructor(event: Event, target: EventTree, path: readonly EventTree[]) {
    this.path = path;
    this.#event = event;
    const stop = (): void => {
      this.stopped = true;
    };
    const own = (name: string, get: () => unknown, set?: (value: unknown) => void): void => {
      Object.defineProperty(event, name, { configurable: true, get, set });
    };
    own("target", () => target);
    own("srcElement", () => target);
    own("currentTarget", () => this.current?.target ?? null);
    own("eventPhase", () => this.current?.phase ?? 0);
    own("composedPath", () => () => (this.current ? [...this.path] : []));
    own("stopPropagation", () => stop);
    own("stopImmediatePropagation", () => () => {
      stop();
      this.stoppedAtOnce = true;
    });
    own(
      "cancelBubble",
      () => this.stopped,
      (value) => {
        if (value === true) stop();
      },
    );
  }

  /** Calls the listeners of one step, unless a former one has stopped the event. */
  visit(step: Step, entries: readonly Entry[]): void {
    if (this.stopped) return;
    this.current = step;
    for (const entry of entries) {
      if (entry.removed || this.stoppedAtOnce) continue;
      if (entry.once) step.target.drop(entry);
      call(entry.callback, step.target, this.#event);
    }
  }
}

function call(callback: EventListenerOrEventListenerObject, target: EventTree, event: Event): void {
  try {
    if (typeof callback === "function") callback.call(target, event);
    else callback.handleEvent(event);
  } catch (error) {
    // A listener's bug is the page's to see; it must not keep the other listeners from the event.
    queueMicrotask(() => {
      throw error;
    });
  }
}

export class EventTree extends EventTarget {
  readonly #parent: EventTree | null;
  #entries: Entry[] = [];
  readonly #handlers = new Map<string, { handler: (event: Event) => void; listener: (event: Event) => void }>();

  constructor(parent: EventTree | null) {
    super();
    this.#parent = parent;
  }

  override addEventListener(
    type: string,
    callback: EventListenerOrEventListenerObject | null,
    options?: boolean | AddEventListenerOptions,
  ): void {
    const capture = isCapture(options);
    const rest = typeof options === "object" ? options : {};
    if (!callback || rest.signal?.aborted) return;
    if (this.#entries.some((entry) => entry.type === type && entry.callback === callback && entry.capture === capture))
      return;
    const entry: Entry = { type, callback, capture, once: rest.once === true, removed: false };
    this.#entries.push(entry);
    rest.signal?.addEventListener("abort", () => this.drop(entry), { once: true });
  }

  override removeEventListener(
    type: string,
    callback: EventListenerOrEventListenerObject | null,
    options?: boolean | EventListenerOptions,
  ): void {
    const capture = isCapture(options);
    const entry = this.#entries.find(
      (each) => each.type === type && each.callback === callback && each.capture === capture,
    );
    if (entry) this.drop(entry);
  }

  /** Takes a listener away, also in the middle of a dispatch. */
  drop(entry: Entry): void {
    entry.removed = true;
    this.#entries = this.#entries.filter((each) => each !== entry);
  }

  override dispatchEvent(event: Event): boolean {
    const path = this.#pathUp();
    const passage = new Passage(event, this, path);
    const at = (target: EventTree, capture: boolean): readonly Entry[] =>
      target.#entries.filter((entry) => entry.type === event.type && entry.capture === capture);
    const [, ...above] = path;
    for (const target of above.toReversed()) passage.visit({ target, phase: 1 }, at(target, true));
    passage.visit({ target: this, phase: 2 }, at(this, true));
    passage.visit({ target: this, phase: 2 }, at(this, false));
    if (event.bubbles) for (const target of above) passage.visit({ target, phase: 3 }, at(target, false));
    passage.current = null;
    return !event.defaultPrevented;
  }

  /** This target and all above it. */
  #pathUp(): EventTree[] {
    return [this, ...(this.#parent ? this.#parent.#pathUp() : [])];
  }

  /** The handler of an `on…` attribute. */
  protected handlerOf(type: string): ((event: Event) => void) | null {
    return this.#handlers.get(type)?.handler ?? null;
  }

  /** Sets an `on…` attribute: keeps its place among the listeners when it changes, as the DOM does. */
  protected setHandler(type: string, handler: ((event: Event) => void) | null): void {
    const held = this.#handlers.get(type);
    if (held && handler) {
      held.handler = handler;
    } else if (held) {
      this.removeEventListener(type, held.listener);
      this.#handlers.delete(type);
    } else if (typeof handler === "function") {
      const fresh = { handler, listener: (event: Event) => fresh.handler.call(this, event) };
      this.#handlers.set(type, fresh);
      this.addEventListener(type, fresh.listener);
    }
  }
}
