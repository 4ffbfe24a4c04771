"use client";

import { useMemo, useState } from "react";
import { PanelStack } from "@/components/charts/stack/panel-stack";
import type { StackData } from "@/components/charts/stack/stack-types";
import { CHANNEL_WORDS } from "@/components/features/comparisons/engine/channel-words";
import { Select } from "@/components/ui/form/select";
import type { EngineChannel } from "@/lib/measure/engine/full-load-types";

/** One channel of both sides on the shared grid; null = gap or not recorded. */
export interface ChannelCurves {
  channel: EngineChannel;
  a: (number | null)[];
  b: (number | null)[];
}

export interface ChannelsChartProps {
  rpm: readonly number[];
  curves: readonly ChannelCurves[];
  labels: { a: string; b: string };
  title: string;
  summary: string;
  /** Shown first; all of them when absent. */
  first?: EngineChannel;
}

const ALL = "all";

/** Engine channels of both sides over engine speed, one panel a channel on one axis; one can be looked at alone. */
export function ChannelsChart({ rpm, curves, labels, title, summary, first }: ChannelsChartProps) {
  const [chosen, setChosen] = useState<string>(first ?? ALL);
  const data = useMemo<StackData>(() => {
    const shown = curves.filter(({ channel }) => chosen === ALL || channel === chosen);
    return {
      x: rpm,
      axis: {
        title: "engine speed, 1/min",
        name: "engine speed",
        unit: "1/min",
        spokenUnit: "per minute",
        decimals: 0,
      },
      panelHeight: shown.length === 1 ? 220 : 84,
      panels: shown.map(({ channel, a, b }) => ({
        id: channel,
        label: CHANNEL_WORDS[channel].name,
        unit: CHANNEL_WORDS[channel].unit,
        decimals: CHANNEL_WORDS[channel].decimals,
        lines: [
          { values: a, kind: "a" as const, label: `A ${labels.a}` },
          { values: b, kind: "b" as const, label: `B ${labels.b}` },
        ],
      })),
    };
  }, [rpm, curves, chosen, labels.a, labels.b]);
  return (
    <div className="flex flex-col gap-3">
      <Select
        label="Channel"
        value={chosen}
        onChange={(event) => setChosen(event.target.value)}
        options={[
          { value: ALL, label: "All that are recorded" },
          ...curves.map(({ channel }) => ({ value: channel, label: CHANNEL_WORDS[channel].name })),
        ]}
        fieldClassName="no-print w-full sm:w-72"
      />
      <PanelStack
        title={title}
        data={data}
        summary={summary}
        caption="Engine channels at full load over engine speed, mean of the runs of each side"
      />
    </div>
  );
}
