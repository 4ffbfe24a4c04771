import { cleanup, fireEvent, render, screen, waitFor } from "@testing-library/react";
import { afterEach, expect, it, vi } from "vitest";
import { GatePlanForm } from "@/components/features/programmes/gate-plan-form";
import { GatePlanView } from "@/components/features/programmes/gate-plan-view";
import { gateWords } from "@/components/features/programmes/gate-words";
import type { GatePlan } from "@/lib/gates/plan";
import { gatesNotIn, startingPlan } from "@/lib/gates/starting-plan";

afterEach(cleanup);

vi.setConfig({ testTimeout: 60_000 });

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

const TOUCHED: GatePlan = {
  plan: 1,
  gates: [
    {
      ...{ id: "touched", kind: "touched", level: "must", uncovered: false },
      allowed: { functions: ["Spark"], characteristics: [] },
    },
    {
      ...{ id: "step_limit", kind: "step_limit", level: "should", scope: ["boost"], measure: "unit" },
      ...{ maxNeighbourStep: null, movedAtMost: 10, against: "parent" },
    },
  ],
};

it("asks names, choices and ticks of gates on the calibration, and saves what was typed", async () => {
  const action = vi.fn(async () => ({ ok: true, value: { version: 2 } }));
  const programmeId = "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11";
  render(
    <GatePlanForm
      {...{ programmeId, action }}
      offered={[]}
      version={1}
      plan={TOUCHED}
      blockedBecause={null}
    />,
  );
  const change = (role: string, name: string | RegExp, value: string) =>
    fireEvent.change(screen.getByRole(role, { name }), { target: { value } });
  // The document of these tests does not show what a form starts with in its lists, so each is chosen here.
  for (const gate of TOUCHED.gates) change("combobox", `Level of: ${gateWords(gate).title}`, gate.level);
  change("combobox", /^Measured in/, "unit");
  change("combobox", /^Against/, "parent");
  const functions = screen.getByRole("textbox", { name: /^Functions that may change/ });
  expect(functions).toHaveProperty("value", "Spark");
  fireEvent.change(functions, { target: { value: "Spark\nAir" } });
  fireEvent.click(screen.getByRole("checkbox", { name: "Bytes outside the description may change" }));
  const save = screen.getByRole("button", { name: "Save as version 2" });
  fireEvent.click(save);
  const [touched, steps] = TOUCHED.gates;
  const allowed = { functions: ["Spark", "Air"], characteristics: [] };
  const saved = { plan: 1, gates: [{ ...touched, uncovered: true, allowed }, steps] };
  await waitFor(() =>
    expect(action).toHaveBeenLastCalledWith({ programmeId, basedOnVersion: 1, plan: saved }),
  );

  await waitFor(() => expect(save).toHaveProperty("disabled", false));
  change("textbox", /^Tables or functions/, "");
  fireEvent.click(save);
  expect(await screen.findByText(/Name the tables: a limit in their own unit/)).toBeDefined();
  expect(action).toHaveBeenCalledTimes(1);
});

it("says in the plan to read what a lead set beside the numbers", () => {
  render(<GatePlanView plan={TOUCHED} />);
  expect(screen.getByText("Functions that may change: Spark")).toBeDefined();
  expect(
    screen.getByText(
      "move 10, Tables or functions: boost, measured in the table's own unit, against the parent",
    ),
  ).toBeDefined();
});
