import type { SensorInstance, SensorProps } from "@dnd-kit/core";

export interface TileKeyboardOptions {
  /** The place that an arrow key leads to, as a point of the window, px; null: there is none. */
  readonly step: (key: string) => Promise<{ readonly x: number; readonly y: number } | null>;
}

const DROP_KEYS: readonly string[] = ["Enter", " "];
const ARROW_KEYS: readonly string[] = ["ArrowLeft", "ArrowRight", "ArrowUp", "ArrowDown"];

/**
 * Dragging by keyboard, from tile to tile: Enter or Space picks up, arrows go on by one place, Enter or Space puts
 * down, Escape puts back. dnd-kit's own keyboard sensor moves by pixels and knows only what is drawn; here a place
 * may have to be scrolled to first.
 */
export class TileKeyboardSensor implements SensorInstance {
  static readonly activators = [
    {
      eventName: "onKeyDown" as const,
      handler: ({ nativeEvent }: { nativeEvent: KeyboardEvent }) => {
        if (!DROP_KEYS.includes(nativeEvent.key)) return false;
        nativeEvent.preventDefault();
        return true;
      },
    },
  ];

  readonly autoScrollEnabled = false;
  private readonly listening = new AbortController();

  constructor(private readonly props: SensorProps<TileKeyboardOptions>) {
    const { signal } = this.listening;
    const { document, window } = browserOf(props.event);
    // Not for the key that picked it up.
    setTimeout(() => {
      if (!signal.aborted) document.addEventListener("keydown", this.onKeyDown, { capture: true, signal });
    });
    window.addEventListener("resize", () => this.end("cancel"), { signal });
    document.addEventListener("visibilitychange", () => this.end("cancel"), { signal });
    // A click elsewhere means that the person has turned to something else.
    document.addEventListener("pointerdown", () => this.end("cancel"), { signal });
    const box = props.activeNode.node.current?.getBoundingClientRect();
    props.onStart({ x: box?.left ?? 0, y: box?.top ?? 0 });
  }

  private readonly onKeyDown = (event: KeyboardEvent) => {
    const { key } = event;
    if (key === "Tab") return this.end("cancel");
    const isOurs = DROP_KEYS.includes(key) || ARROW_KEYS.includes(key) || key === "Escape";
    if (!isOurs) return;
    event.preventDefault();
    event.stopPropagation();
    if (key === "Escape") return this.end("cancel");
    if (DROP_KEYS.includes(key)) return this.end("drop");
    void this.props.options.step(key).then((point) => {
      if (point && !this.listening.signal.aborted) this.props.onMove(point);
    });
  };

  private end(how: "drop" | "cancel") {
    if (this.listening.signal.aborted) return;
    this.listening.abort();
    if (how === "drop") this.props.onEnd();
    else this.props.onCancel();
  }
}

function browserOf(event: Event): { readonly document: Document; readonly window: Window } {
  const document = event.target instanceof Node ? (event.target.ownerDocument ?? window.document) : window.document;
  return { document, window: document.defaultView ?? window };
}
