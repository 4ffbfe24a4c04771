import { cleanup, fireEvent, render, screen, waitFor } from "@testing-library/react";
import { afterEach, expect, it, vi } from "vitest";
import { GatePlanForm } from "@/components/features/programmes/gate-plan-form";
import { gateWords } from "@/components/features/programmes/gate-words";
import type { GatePlan } from "@/lib/gates/plan";
import { gatesNotIn, startingPlan } from "@/lib/gates/starting-plan";

afterEach(cleanup);

const NEWER = ["conditions.tyres", "conditions.fuel", "limit.knock_retard", "smooth"];
const OLDER: GatePlan = {
  plan: 1,
  gates: startingPlan().gates.filter(({ id }) => !NEWER.includes(id)),
};

it("offers an older plan the gates that it lacks, and saves only those that are switched on", async () => {
  const action = vi.fn(async () => ({ ok: true, value: { version: 3 } }));
  const programmeId = "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11";
  const offered = gatesNotIn(OLDER);
  render(
    <GatePlanForm {...{ programmeId, action, offered }} version={2} plan={OLDER} blockedBecause={null} />,
  );
  const fuel = screen.getByRole("combobox", { name: "Level of: A and B on the same fuel" });
  // The document of these tests does not show what a form starts with in its lists, so each is chosen here.
  const choose = (list: HTMLElement, value: string) => fireEvent.change(list, { target: { value } });
  for (const gate of [...OLDER.gates, ...offered])
    choose(screen.getByRole("combobox", { name: `Level of: ${gateWords(gate).title}` }), gate.level);
  const save = screen.getByRole("button", { name: "Save as version 3" });
  fireEvent.click(save);
  await waitFor(() =>
    expect(action).toHaveBeenLastCalledWith({ programmeId, basedOnVersion: 2, plan: OLDER }),
  );
  await waitFor(() => expect(save).toHaveProperty("disabled", false));
  choose(fuel, "must");
  fireEvent.click(save);
  const gates = [
    ...OLDER.gates,
    { id: "conditions.fuel", kind: "conditions", level: "must", ask: "alike_fuel" },
  ];
  await waitFor(() =>
    expect(action).toHaveBeenLastCalledWith({ programmeId, basedOnVersion: 2, plan: { plan: 1, gates } }),
  );
});

it("switches on no gate by itself", () => {
  expect(gatesNotIn(OLDER).map(({ id, level }) => [id, level])).toEqual(NEWER.map((id) => [id, "off"]));
  expect(gatesNotIn(startingPlan())).toEqual([]);
});
