"use client";

import { Check } from "lucide-react";
import {
  createContext,
  type FormEvent,
  type ReactNode,
  useActionState,
  useContext,
  useMemo,
  useOptimistic,
  useState,
  useTransition,
} from "react";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";

interface Answer {
  ok: boolean;
  message?: string;
}

export type LookedAtAction = (previous: Answer | null, form: FormData) => Promise<Answer>;

interface LookedAt {
  looked: ReadonlySet<string>;
  /** Marks digests, or takes the mark away; shown at once. */
  mark: (digests: readonly string[], looked: boolean) => void;
  /** For a browser without script: the form is sent as it is. */
  submit: (form: FormData) => void;
  fields: { revisionId: string; changeSetId: string };
  problem: string | null;
}

const Context = createContext<LookedAt | null>(null);

export interface LookedAtProviderProps {
  lookedAt: readonly string[];
  revisionId: string;
  changeSetId: string;
  action: LookedAtAction;
  children: ReactNode;
}

/** Holds what this person has looked at, for the list, the counter, the form and the keys alike. */
export function LookedAtProvider({
  lookedAt,
  revisionId,
  changeSetId,
  action,
  children,
}: LookedAtProviderProps) {
  const known = useMemo(() => new Set(lookedAt), [lookedAt]);
  const [looked, change] = useOptimistic(
    known,
    (now: ReadonlySet<string>, step: { digests: readonly string[]; looked: boolean }) => {
      const next = new Set(now);
      for (const digest of step.digests) {
        if (step.looked) next.add(digest);
        else next.delete(digest);
      }
      return next;
    },
  );
  const [answer, submit] = useActionState(action, null);
  const [refused, setRefused] = useState<string | null>(null);
  const [, start] = useTransition();
  const value = useMemo<LookedAt>(
    () => ({
      looked,
      mark: (digests, isLooked) =>
        start(async () => {
          change({ digests, looked: isLooked });
          const state = await action(null, lookedAtForm({ revisionId, changeSetId }, digests, isLooked));
          setRefused(state.ok ? null : (state.message ?? "The mark was not kept. Try again."));
        }),
      submit,
      fields: { revisionId, changeSetId },
      problem: refused ?? (answer && !answer.ok ? (answer.message ?? null) : null),
    }),
    [looked, change, action, revisionId, changeSetId, submit, refused, answer],
  );
  return <Context value={value}>{children}</Context>;
}

function lookedAtForm(fields: LookedAt["fields"], digests: readonly string[], looked: boolean): FormData {
  const form = new FormData();
  for (const [name, text] of Object.entries(fields)) form.set(name, text);
  for (const digest of digests) form.append("digest", digest);
  form.set("looked", looked ? "yes" : "no");
  return form;
}

/** Null outside a provider: then nothing can be marked. */
export function useLookedAt(): LookedAt | null {
  return useContext(Context);
}

/** Whether all of these were looked at. */
export const hasAll = (looked: ReadonlySet<string>, digests: readonly string[]) =>
  digests.every((digest) => looked.has(digest));

/** "looked at" with a tick; nothing where it was not. */
export function LookedAtMark({ digests }: { digests: readonly string[] }) {
  const state = useLookedAt();
  if (!state || !hasAll(state.looked, digests)) return null;
  return (
    <span className="inline-flex shrink-0 items-center gap-1 text-13 text-met">
      <Check aria-hidden size={14} />
      looked at
    </span>
  );
}

/** "5 of 12 looked at". */
export function LookedAtCount({ items }: { items: readonly (readonly string[])[] }) {
  const state = useLookedAt();
  if (!state) return null;
  const count = items.filter((digests) => hasAll(state.looked, digests)).length;
  return (
    <span className="tabular text-13 text-ink2">
      {count} of {items.length} looked at
    </span>
  );
}

/** The button under a change; works as a plain form too. */
export function LookedAtForm({ digests }: { digests: readonly string[] }) {
  const state = useLookedAt();
  if (!state) return null;
  const isLooked = hasAll(state.looked, digests);
  const send = (event: FormEvent) => {
    event.preventDefault();
    state.mark(digests, !isLooked);
  };
  return (
    <form action={state.submit} onSubmit={send} className="flex flex-col items-start gap-2">
      {Object.entries(state.fields).map(([name, text]) => (
        <input key={name} type="hidden" name={name} value={text} />
      ))}
      {digests.map((digest) => (
        <input key={digest} type="hidden" name="digest" value={digest} />
      ))}
      <input type="hidden" name="looked" value={isLooked ? "no" : "yes"} />
      <Button type="submit" aria-pressed={isLooked} icon={<Check />}>
        Looked at
      </Button>
      {state.problem && (
        <Notice tone="problem" live>
          {state.problem}
        </Notice>
      )}
    </form>
  );
}
