import { DescriptionList } from "@/components/ui/data/description-list";
import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import type { RunResult } from "@/lib/measure/types";

const LOSS_SOURCE = {
  run: "this run's own coast-down",
  twin: "the coast-downs of its twin",
  "road day": "the coast-downs of the road day",
} as const;

/** Peak, factor and losses in words and figures. */
export function RunPeak({ result }: { result: RunResult }) {
  const { peak, factor, loss } = result;
  const factorWords =
    factor && factor.id !== "none" ? `${factor.id} ${numberText(factor.value, { decimals: 4 })}` : "none";
  return (
    <DescriptionList
      items={[
        {
          term: "Peak power, crank estimate, air of the day",
          description: peak ? (
            <>
              <Quantity
                value={peak.engine_kw}
                unit="kW"
                halfWidth={peak.uncertainty_kw}
                decimals={1}
                orNotStated
              />{" "}
              at {numberText(peak.engine_kw_rpm)} per minute
            </>
          ) : (
            "none: it takes a usable pull and a coast-down"
          ),
        },
        {
          term: "Peak torque, crank estimate, air of the day",
          description: peak ? (
            <>
              <Quantity
                value={peak.engine_nm}
                unit="N·m"
                halfWidth={peak.uncertainty_nm}
                decimals={1}
                orNotStated
              />{" "}
              at {numberText(peak.engine_nm_rpm)} per minute
            </>
          ) : (
            "none"
          ),
        },
        {
          term: "Weather factor",
          description: factor ? (
            <>
              <span className="tabular">{factorWords}</span>, {factor.applied ? "applied" : "not applied"}
              {factor.in_range === false && ", outside its permitted range"}. {factor.why}
              {peak && factor.id !== "none" && " The peak above does not carry it."}
            </>
          ) : (
            "none"
          ),
        },
        {
          term: "Road load in neutral",
          description: loss ? (
            <span className="flex flex-col">
              <span className="tabular">
                F0 {numberText(loss.f0_n, { decimals: 1 })} N, F1{" "}
                {numberText(loss.f1_n_per_mps, { decimals: 2 })} N per m/s, F2{" "}
                {numberText(loss.f2_n_per_mps2, { decimals: 4 })} N per (m/s)²
              </span>
              <span>from {LOSS_SOURCE[loss.source]}</span>
            </span>
          ) : (
            "not known: no coast-down of 20 km/h or more"
          ),
        },
        { term: "Speed from", description: result.speed_source ?? "not known" },
        {
          term: "Sample rate",
          description:
            result.sample_rate_hz === null || result.sample_rate_hz === undefined ? (
              "not known"
            ) : (
              <Quantity value={result.sample_rate_hz} unit="Hz" decimals={1} />
            ),
        },
      ]}
    />
  );
}
