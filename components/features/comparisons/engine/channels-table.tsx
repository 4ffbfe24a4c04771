import { CHANNEL_WORDS } from "@/components/features/comparisons/engine/channel-words";
import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { Table } from "@/components/ui/data/table";
import { ENGINE_CHANNELS, type EngineChannel, type SideChannel } from "@/lib/measure/engine/full-load-types";
import type { CampaignResult } from "@/lib/measure/types";

type Labels = { a: string; b: string };

/** Which end of a channel counts as the worst: the result says so where both sides carry it. */
function worstEnd(result: CampaignResult, channel: EngineChannel): "min" | "max" {
  return result.delta?.channels?.[channel]?.worst.of ?? "max";
}

/** Worst value of each channel at full load on both sides, with the difference of the runs' means. */
export function ChannelsTable({ result, labels }: { result: CampaignResult; labels: Labels }) {
  const { A, B } = result.sides;
  const rows = ENGINE_CHANNELS.filter(
    (channel) => A?.full_load?.channels[channel] ?? B?.full_load?.channels[channel],
  );
  const side = (found: SideChannel | undefined, channel: EngineChannel) => {
    if (!found) return <span className="text-ink2">not recorded</span>;
    const worst = found[worstEnd(result, channel)];
    const { unit, decimals } = CHANNEL_WORDS[channel];
    return (
      <>
        <Quantity value={worst.value} unit={unit} decimals={decimals} n={found.n} />
        <span className="block text-13 text-ink2">
          run {worst.run}
          {worst.rpm !== null && `, at ${numberText(Math.round(worst.rpm / 10) * 10)}`}
        </span>
      </>
    );
  };
  const difference = (channel: EngineChannel) => {
    const worst = result.delta?.channels?.[channel]?.worst;
    if (!worst) return "–";
    const { unit, differenceUnit = unit, decimals } = CHANNEL_WORDS[channel];
    if (worst.half_width === null) return <span className="text-ink2">no interval, not claimed</span>;
    const digits = Math.min(4, decimalsForHalfWidth(worst.half_width, decimals));
    return (
      <Quantity
        value={worst.mean_difference}
        halfWidth={worst.half_width}
        unit={differenceUnit}
        decimals={digits}
        signed
      />
    );
  };
  const rise = (channel: EngineChannel) => {
    const { unit, differenceUnit = unit, decimals } = CHANNEL_WORDS[channel];
    const of = (found: SideChannel | undefined) =>
      found?.mean_rise === null || found === undefined
        ? "–"
        : numberText(found.mean_rise, { decimals, signed: true });
    const [a, b] = [of(A?.full_load?.channels[channel]), of(B?.full_load?.channels[channel])];
    return `${a}, ${b}${differenceUnit && ` ${differenceUnit}`}`;
  };
  return (
    <Table
      caption="Engine channels at full load: the worst value of each side and its difference"
      dense
      rows={rows}
      rowKey={(channel) => channel}
      empty="No run of this comparison recorded an engine channel."
      columns={[
        {
          key: "what",
          header: "Channel",
          rowHeader: true,
          className: "min-w-36",
          cell: (channel) =>
            `${CHANNEL_WORDS[channel].name}, ${worstEnd(result, channel) === "max" ? "highest" : "lowest"}`,
        },
        { key: "d", header: "B \u2212 A, mean of the runs", numeric: true, cell: difference },
        {
          key: "a",
          header: `A ${labels.a}`,
          numeric: true,
          cell: (channel) => side(A?.full_load?.channels[channel], channel),
        },
        {
          key: "b",
          header: `B ${labels.b}`,
          numeric: true,
          cell: (channel) => side(B?.full_load?.channels[channel], channel),
        },
        { key: "rise", header: "Change in a pull, A, B", numeric: true, cell: rise },
      ]}
    />
  );
}
