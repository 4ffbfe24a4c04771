"use client";

import { type KeyboardEvent, type PointerEvent, useEffect, useRef, useState } from "react";
import { type CursorStore, useCursorIndex } from "@/components/charts/frame/cursor-store";
import { nearestIndex, type Range } from "@/components/charts/frame/series";

export interface CursorPadProps {
  store: CursorStore;
  xs: readonly number[];
  /** Part of the grid in view: first and last index. */
  first: number;
  last: number;
  /** Plot area inside the drawing, px. */
  left: number;
  right: number;
  height: number;
  /** Name of the axis, e.g. "engine speed". */
  axisName: string;
  summaryId: string;
  /** Full sentence for one grid point, for the live region. */
  speak: (index: number) => string;
  /** Short position, e.g. "3 400 per minute". */
  position: (index: number) => string;
  /** Called when a stretch was dragged out with the mouse. */
  onRange?: (range: Range) => void;
  onReset?: () => void;
}

const DRAG_PX = 8;
/** Long enough that a held arrow key is not spoken at every step. */
const SPEAK_AFTER_MS = 300;

/** The layer over a drawing that takes pointer, touch and keys. Only this and the cursor render when it moves. */
export function CursorPad(props: CursorPadProps) {
  const { store, xs, first, last, left, right, height, axisName, summaryId, speak, position } = props;
  const index = useCursorIndex(store);
  const pad = useRef<HTMLDivElement>(null);
  const dragFrom = useRef<number | null>(null);
  const [drag, setDrag] = useState<Range | null>(null);
  const [spoken, setSpoken] = useState("");
  const byKey = useRef(false);

  useEffect(() => {
    if (index === null || !byKey.current) return;
    const timer = setTimeout(() => setSpoken(speak(index)), SPEAK_AFTER_MS);
    return () => clearTimeout(timer);
  }, [index, speak]);

  const start = xs[first] ?? 0;
  const end = xs[last] ?? start;
  const pixelOf = (event: PointerEvent) => {
    const box = pad.current?.getBoundingClientRect();
    return Math.min(right, Math.max(left, event.clientX - (box?.left ?? 0)));
  };
  const valueAt = (px: number) => start + ((px - left) / (right - left)) * (end - start);
  const moveTo = (to: number) => store.set(Math.min(last, Math.max(first, to)));

  const onPointerMove = (event: PointerEvent) => {
    byKey.current = false;
    const px = pixelOf(event);
    moveTo(nearestIndex(xs, valueAt(px)));
    const origin = dragFrom.current;
    if (origin !== null && Math.abs(px - origin) > DRAG_PX) {
      setDrag({ from: Math.min(px, origin), to: Math.max(px, origin) });
    }
  };
  const onPointerUp = () => {
    if (drag) props.onRange?.({ from: valueAt(drag.from), to: valueAt(drag.to) });
    dragFrom.current = null;
    setDrag(null);
  };

  const onKeyDown = (event: KeyboardEvent) => {
    const at = index ?? Math.round((first + last) / 2);
    const step = event.shiftKey ? 10 : 1;
    const target: Record<string, number> = {
      ArrowRight: at + step,
      ArrowUp: at + step,
      ArrowLeft: at - step,
      ArrowDown: at - step,
      PageUp: at + 10,
      PageDown: at - 10,
      Home: first,
      End: last,
    };
    const to = target[event.key];
    if (event.key === "Escape") store.set(null);
    else if (to !== undefined) {
      byKey.current = true;
      moveTo(index === null ? at : to);
    } else return;
    event.preventDefault();
  };

  return (
    <>
      <div
        ref={pad}
        role="slider"
        tabIndex={0}
        aria-label={`Cursor over ${axisName}`}
        aria-describedby={summaryId}
        aria-valuemin={start}
        aria-valuemax={end}
        aria-valuenow={xs[index ?? first] ?? start}
        aria-valuetext={index === null ? "resting" : position(index)}
        onKeyDown={onKeyDown}
        onPointerMove={onPointerMove}
        onPointerDown={(event) => {
          onPointerMove(event);
          if (event.pointerType === "mouse" && event.button === 0 && props.onRange) {
            dragFrom.current = pixelOf(event);
            pad.current?.setPointerCapture(event.pointerId);
          }
        }}
        onPointerUp={onPointerUp}
        onPointerCancel={onPointerUp}
        onPointerLeave={(event) => event.pointerType === "mouse" && store.set(null)}
        onDoubleClick={props.onReset}
        className="no-print absolute inset-0 cursor-crosshair touch-pan-y select-none"
      >
        {drag && (
          <svg aria-hidden="true" className="pointer-events-none absolute inset-0 size-full">
            <rect
              x={drag.from}
              y={0}
              width={drag.to - drag.from}
              height={height}
              fillOpacity="0.12"
              className="fill-action stroke-action"
            />
          </svg>
        )}
      </div>
      <p role="status" className="sr-only">
        {spoken}
      </p>
    </>
  );
}
