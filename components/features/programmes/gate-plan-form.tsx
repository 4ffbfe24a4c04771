"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { Plus } from "lucide-react";
import { useState } from "react";
import { FormProvider, useFieldArray, useForm } from "react-hook-form";
import type { z } from "zod";
import type { PlanFields } from "@/components/features/programmes/gate-field-words";
import { GateRow } from "@/components/features/programmes/gate-row";
import { GATE_GROUPS, SPRINT_TIMES } from "@/components/features/programmes/gate-words";
import {
  SaveVersion,
  useSaveVersion,
  type VersionAnswer,
} from "@/components/features/programmes/save-version";
import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";
import { SectionHeading } from "@/components/ui/layout/section-heading";
import type { Gate, GatePlan } from "@/lib/gates/plan";
import { gatePlanSchema } from "@/lib/services/gate-plans/schema";

export interface GatePlanFormProps {
  programmeId: string;
  version: number;
  plan: GatePlan;
  /** Gates that the plan does not name yet, switched off: only those that are switched on are saved. */
  offered: readonly Gate[];
  blockedBecause: string | null;
  action: (input: { programmeId: string; basedOnVersion: number; plan: GatePlan }) => Promise<VersionAnswer>;
}

/** Kinds that a plan may hold several of, so that one can be taken out again. */
const REPEATED: ReadonlySet<Gate["kind"]> = new Set(["gain", "sprint", "step_limit"]);

type Fields = z.input<typeof gatePlanSchema>;

/** What a gate holds as it is typed: numbers as texts, names one a line. */
function typed(gate: Gate): PlanFields["gates"][number] {
  const text = (value: unknown) =>
    Array.isArray(value) ? value.join("\n") : typeof value === "number" ? String(value) : (value ?? "");
  const entries = Object.entries(gate).map(([name, value]) => [name, text(value)]);
  if (gate.kind !== "touched") return Object.fromEntries(entries);
  const { functions = [], characteristics = [] } = gate.allowed ?? {};
  const allowed = { functions: text(functions), characteristics: text(characteristics) };
  return { ...Object.fromEntries(entries), allowed };
}

/** An id that the plan does not have yet: "gain.2", "sprint.0-100". */
function freshId(base: string, taken: readonly { id: string }[]): string {
  const has = (id: string) => taken.some((gate) => gate.id === id);
  if (!has(base)) return base;
  let nth = 2;
  while (has(`${base}.${nth}`)) nth += 1;
  return `${base}.${nth}`;
}

/** The newest plan, to be changed into the next version. */
export function GatePlanForm({
  programmeId,
  version,
  plan,
  offered,
  blockedBecause,
  action,
}: GatePlanFormProps) {
  const form = useForm<Fields, unknown, GatePlan>({
    resolver: zodResolver(gatePlanSchema),
    defaultValues: { plan: 1, gates: [...plan.gates, ...offered].map(typed) as Fields["gates"] },
  });
  const { fields, append, remove } = useFieldArray({ control: form.control, name: "gates", keyName: "key" });
  const [time, setTime] = useState("0-100");
  const { save, ...state } = useSaveVersion(version);
  const wrong = Object.keys(form.formState.errors).length > 0;
  const gates = fields as unknown as (Gate & { key: string })[];

  const addGain = () =>
    append({
      ...{ id: freshId("gain", gates), kind: "gain", level: "should" },
      ...{ fromRpm: "2500", toRpm: "4500", atLeastPct: "1" },
    });
  const addStepLimit = () =>
    append({
      ...{ id: freshId("step_limit", gates), kind: "step_limit", level: "should", scope: "" },
      ...{ measure: "unit", against: "standing", maxNeighbourStep: "", movedAtMost: "" },
    });
  const addSprint = () => {
    const base = `sprint.${time.replaceAll(/[^a-z0-9.-]+/g, "-")}`;
    append({ id: freshId(base, gates), kind: "sprint", level: "should", time, notSlowerByS: "0.1" });
  };
  const send = form.handleSubmit((parsed) => {
    const left = (gate: Gate) => gate.level === "off" && offered.some(({ id }) => id === gate.id);
    const asked = { ...parsed, gates: parsed.gates.filter((gate) => !left(gate)) };
    return save(() => action({ programmeId, basedOnVersion: version, plan: asked }));
  });

  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex flex-col gap-6">
        {GATE_GROUPS.map((group) => (
          <div key={group.title}>
            <SectionHeading>{group.title}</SectionHeading>
            <ul className="mt-1">
              {gates.map(
                (gate, index) =>
                  group.kinds.includes(gate.kind) && (
                    <GateRow
                      key={gate.key}
                      gate={gate}
                      index={index}
                      onRemove={REPEATED.has(gate.kind) ? () => remove(index) : undefined}
                    />
                  ),
              )}
            </ul>
            {group.kinds.includes("gain") && (
              <Button size="compact" icon={<Plus />} onClick={addGain}>
                Ask for a gain in another region
              </Button>
            )}
            {group.kinds.includes("step_limit") && (
              <Button size="compact" icon={<Plus />} onClick={addStepLimit}>
                Limit the steps of other tables
              </Button>
            )}
            {group.kinds.includes("sprint") && (
              <div className="flex flex-wrap items-end gap-2">
                <Select
                  label="Another time"
                  options={SPRINT_TIMES}
                  value={time}
                  onChange={(event) => setTime(event.target.value)}
                  fieldClassName="w-44"
                />
                <Button icon={<Plus />} onClick={addSprint}>
                  Add
                </Button>
              </div>
            )}
          </div>
        ))}
        <SaveVersion
          version={version}
          blockedBecause={blockedBecause}
          {...state}
          problem={wrong ? "Some gates need another look: each says why." : state.problem}
        />
      </form>
    </FormProvider>
  );
}
