"use client";

import { useActionState } from "react";
import type { SignInAction } from "@/components/features/sign-in/sign-in-form";
import { Notice } from "@/components/ui/status/notice";

export interface SamplePeopleProps {
  people: readonly { id: string; name: string; roles: readonly string[] }[];
  next: string;
  action: SignInAction;
}

/** The people of the demo, one click each. What each role is for stands beside the name. */
export function SamplePeople({ people, next, action }: SamplePeopleProps) {
  const [answer, submit, pending] = useActionState(action, null);
  return (
    <div className="flex flex-col gap-3">
      <ul className="flex flex-col gap-2">
        {people.map((person) => (
          <li key={person.id}>
            <form action={submit}>
              <input type="hidden" name="userId" value={person.id} />
              <input type="hidden" name="next" value={next} />
              <button
                type="submit"
                disabled={pending}
                className="flex min-h-control w-full items-baseline justify-between gap-3 rounded border border-edge bg-surface px-4 py-2.5 text-left hover:border-ink disabled:text-ink2"
              >
                <span className="font-semibold text-15">{person.name}</span>
                <span className="text-right text-13 text-ink2">{person.roles.join(", ")}</span>
              </button>
            </form>
          </li>
        ))}
      </ul>
      {answer && !answer.ok && (
        <Notice tone="problem" live>
          {answer.message}
        </Notice>
      )}
    </div>
  );
}
