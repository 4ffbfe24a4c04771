import { CHANNEL_WORDS } from "@/components/features/comparisons/engine/channel-words";
import { type ChannelCurves, ChannelsChart } from "@/components/features/comparisons/engine/channels-chart";
import { ChannelsTable } from "@/components/features/comparisons/engine/channels-table";
import { numberText } from "@/components/ui/data/number-text";
import { ENGINE_CHANNELS, type EngineChannel, type SideFullLoad } from "@/lib/measure/engine/full-load-types";
import { valuesOn } from "@/lib/measure/engine/values-on";
import type { CampaignResult } from "@/lib/measure/types";

type Labels = { a: string; b: string };

/** Engine channels of both sides at full load: the worst values, the curves, and plainly what was not recorded. */
export function EngineSection({ result, labels }: { result: CampaignResult; labels: Labels }) {
  const [a, b] = [result.sides.A?.full_load, result.sides.B?.full_load];
  if (!a && !b) {
    return (
      <p className="px-4 pb-4 text-15 text-ink2 md:px-5">
        This result was computed before engine channels were read. Recompute the comparison.
      </p>
    );
  }
  const rpm = [...new Set([...(a?.rpm ?? []), ...(b?.rpm ?? [])])].sort((x, y) => x - y);
  const curves = ENGINE_CHANNELS.flatMap((channel): ChannelCurves[] => {
    const of = (side: SideFullLoad | null | undefined) =>
      valuesOn(rpm, side?.rpm ?? [], side?.channels[channel]?.values ?? []);
    return a?.channels[channel] || b?.channels[channel] ? [{ channel, a: of(a), b: of(b) }] : [];
  });
  const missing = ENGINE_CHANNELS.filter(
    (channel) => a?.not_recorded.includes(channel) || b?.not_recorded.includes(channel),
  ).map((channel) => {
    const sides = [
      a?.not_recorded.includes(channel) ? labels.a : null,
      b?.not_recorded.includes(channel) ? labels.b : null,
    ].filter((label) => label !== null);
    return `${CHANNEL_WORDS[channel].name.toLowerCase()} (${sides.join(", ")})`;
  });
  const longest = Math.max(a?.longest_load_s ?? 0, b?.longest_load_s ?? 0);
  return (
    <>
      <ChannelsTable result={result} labels={labels} />
      <div className="flex flex-col gap-3 px-4 py-4 md:px-5">
        {missing.length > 0 && (
          <p className="text-15">
            <span className="font-semibold">Not recorded:</span> {missing.join(", ")}.
          </p>
        )}
        <p className="max-w-prose text-13 text-ink2">
          A value counts as highest or lowest when it holds 0.3 s, from 1 s after tip-in. The longest pull
          holds full load for {numberText(longest, { decimals: 1 })} s; sensors that follow slowly show less
          than the engine does. Limits are set in the gate plan.
        </p>
        <OvershootLine a={a} b={b} labels={labels} />
        {curves.length > 0 && (
          <ChannelsChart
            rpm={rpm}
            curves={curves}
            labels={labels}
            title="Engine channels over engine speed"
            summary={bandSummary(result)}
            first={mostMoved(result, curves)}
          />
        )}
      </div>
    </>
  );
}

/** The channel in which B parts from A at most engine speeds: what one wants to look at first. */
function mostMoved(result: CampaignResult, curves: readonly ChannelCurves[]): EngineChannel | undefined {
  const places = (channel: EngineChannel) => {
    const found = result.delta?.channels?.[channel];
    if (!found?.simultaneous) return 0;
    return found.rpm.filter((_, k) => (found.low[k] ?? 0) > 0 || (found.high[k] ?? 0) < 0).length;
  };
  const names = curves.map((curve) => curve.channel);
  return names.sort((x, y) => places(y) - places(x))[0];
}

function OvershootLine({
  a,
  b,
  labels,
}: {
  a: SideFullLoad | null | undefined;
  b: SideFullLoad | null | undefined;
  labels: Labels;
}) {
  const words = (side: SideFullLoad | null | undefined, label: string) =>
    side?.boost
      ? `${label} ${numberText(side.boost.overshoot_kpa, { decimals: 1, signed: true })} kPa over its ${side.boost.reference} (run ${side.boost.run}, n ${side.boost.n})`
      : null;
  const lines = [words(a, labels.a), words(b, labels.b)].filter((line) => line !== null);
  if (lines.length === 0) return null;
  return <p className="text-15">Highest boost overshoot: {lines.join("; ")}.</p>;
}

/** Where each channel's band excludes zero, in words: the text alternative of the panels. */
function bandSummary(result: CampaignResult): string {
  const sentences = ENGINE_CHANNELS.flatMap((channel) => {
    const found = result.delta?.channels?.[channel];
    if (!found?.simultaneous) return [];
    const outside = (low: boolean) =>
      found.rpm.filter((_, k) => {
        const value = low ? found.high[k] : found.low[k];
        return value !== null && (low ? value < 0 : value > 0);
      });
    return ([true, false] as const).flatMap((low) => {
      const rpm = outside(low);
      if (rpm.length === 0) return [];
      const name = CHANNEL_WORDS[channel].name;
      const span =
        rpm.length === 1
          ? `at ${numberText(rpm[0])}`
          : `at places between ${numberText(rpm[0])} and ${numberText(rpm.at(-1))}`;
      return [`${name} of B is ${low ? "lower" : "higher"} than of A ${span} per minute.`];
    });
  });
  const level = numberText(100 * (result.delta?.level ?? 0.95));
  return sentences.length > 0
    ? `Outside each channel’s own ${level} % band: ${sentences.join(" ")}`
    : `In no channel does B differ from A by more than that channel’s ${level} % band.`;
}
