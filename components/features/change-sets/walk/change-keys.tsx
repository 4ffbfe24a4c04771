"use client";

import { Keyboard } from "lucide-react";
import type { Route } from "next";
import { useRouter } from "next/navigation";
import { useCallback, useEffect, useRef, useState } from "react";
import { hasAll, useLookedAt } from "@/components/features/change-sets/walk/looked-at";
import { keysAreOn, rememberKeys } from "@/components/features/change-sets/walk/remember-keys";
import { Button } from "@/components/ui/action/button";
import { LinkButton } from "@/components/ui/action/link-button";
import { Checkbox } from "@/components/ui/form/checkbox";
import { Dialog } from "@/components/ui/layout/dialog";

export interface WalkItem {
  href: Route;
  digests: readonly string[];
  /** What the live region says of it. */
  spoken: string;
}

export interface ChangeKeysProps {
  items: readonly WalkItem[];
  /** Place of the opened one; -1: none of them. */
  current: number;
  /** Whether this person keeps marks; without, there is no key for them. */
  mayLook: boolean;
}

const KEYS: readonly [string, string][] = [
  ["n", "next change"],
  ["p", "previous change"],
  ["l", "mark as looked at, or take the mark away"],
  ["t", "values table of a curve"],
  ["?", "this list"],
];

/** Keys are words where text is typed, and belong to the dialog while one is open. */
function isTaken(event: KeyboardEvent): boolean {
  if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || event.isComposing)
    return true;
  if (document.querySelector('[role="dialog"]')) return true;
  const at = event.target;
  if (!(at instanceof HTMLElement)) return false;
  const typed =
    at instanceof HTMLInputElement && !["radio", "checkbox", "button", "submit"].includes(at.type);
  return (
    typed || at instanceof HTMLTextAreaElement || at instanceof HTMLSelectElement || at.isContentEditable
  );
}

/** Previous and next with their keys, a live region that speaks where one is, and the list of keys. */
export function ChangeKeys({ items, current, mayLook }: ChangeKeysProps) {
  const router = useRouter();
  const state = useLookedAt();
  const [isOpen, setOpen] = useState(false);
  const [isOn, setOn] = useState(true);
  const [spoken, setSpoken] = useState("");
  const target = useRef(current);
  const seen = useRef(current);

  useEffect(() => {
    setOn(keysAreOn());
    showInList();
  }, []);

  useEffect(() => {
    target.current = current;
    if (seen.current === current) return;
    seen.current = current;
    const item = items[current];
    if (!item) return;
    setSpoken(`Change ${current + 1} of ${items.length}. ${item.spoken}`);
    document.getElementById("change-heading")?.focus();
    showInList();
  }, [current, items]);

  const go = useCallback(
    (by: 1 | -1) => {
      const next = items[target.current + by];
      if (!next) {
        setSpoken(by === 1 ? "This is the last change." : "This is the first change.");
        return;
      }
      target.current += by;
      router.push(next.href, { scroll: false });
    },
    [items, router],
  );

  const toggle = useCallback(() => {
    const digests = items[current]?.digests;
    if (!digests || !state || !mayLook) return;
    const isLooked = hasAll(state.looked, digests);
    state.mark(digests, !isLooked);
    setSpoken(isLooked ? "No longer marked as looked at." : "Marked as looked at.");
  }, [items, current, state, mayLook]);

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (isTaken(event)) return;
      const acts: Record<string, () => void> = {
        n: () => go(1),
        p: () => go(-1),
        l: toggle,
        "?": () => setOpen(true),
      };
      const act = isOn ? acts[event.key] : undefined;
      if (!act) return;
      event.preventDefault();
      act();
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, [go, toggle, isOn]);

  const [previous, next] = [items[current - 1], items[current + 1]];
  return (
    <div className="no-print flex flex-wrap items-center gap-2">
      <Step item={previous} hint="p">
        Previous
      </Step>
      <Step item={next} hint="n">
        Next
      </Step>
      <span className="tabular text-13 text-ink2">
        {current + 1} of {items.length}
      </span>
      <Dialog
        open={isOpen}
        onOpenChange={setOpen}
        title="Keys"
        trigger={
          <Button look="quiet" icon={<Keyboard />} aria-keyshortcuts="?">
            Keys
          </Button>
        }
      >
        <dl className="grid grid-cols-[4rem_1fr] gap-y-2 text-15">
          {KEYS.filter(([key]) => mayLook || key !== "l").map(([key, words]) => (
            <div key={key} className="contents">
              <dt>
                <kbd className="tabular rounded border border-edge px-2 py-0.5">{key}</kbd>
              </dt>
              <dd>{words}</dd>
            </div>
          ))}
        </dl>
        <Checkbox
          className="mt-4"
          label="Use single keys on this device"
          hint="They are off wherever text is typed."
          checked={isOn}
          onChange={(event) => {
            setOn(event.target.checked);
            rememberKeys(event.target.checked);
          }}
        />
      </Dialog>
      <p role="status" className="sr-only">
        {spoken}
      </p>
    </div>
  );
}

function Step({ item, hint, children }: { item: WalkItem | undefined; hint: string; children: string }) {
  if (!item) {
    return (
      <Button disabled aria-keyshortcuts={hint}>
        {children}
      </Button>
    );
  }
  return (
    <LinkButton href={item.href} scroll={false} prefetch={false} aria-keyshortcuts={hint}>
      {children}
    </LinkButton>
  );
}

/** Scrolls the list, not the page, so that the opened row is in sight. */
function showInList(): void {
  const list = document.querySelector("[data-change-list]");
  const row = list?.querySelector('[aria-current="true"]');
  if (!list || !row) return;
  const [box, at] = [list.getBoundingClientRect(), row.getBoundingClientRect()];
  // The head of a group stays on top of the rows: 32 px.
  if (at.top < box.top + 32) list.scrollTop -= box.top + 32 - at.top;
  else if (at.bottom > box.bottom) list.scrollTop += at.bottom - box.bottom;
}
