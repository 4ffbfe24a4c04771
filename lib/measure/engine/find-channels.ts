import type { LogChannel, LogTable } from "@/lib/logs/types";
import { injectorDutyPct } from "@/lib/measure/engine/engine-channels";
import { ENGINE_CHANNELS, type EngineChannel } from "@/lib/measure/engine/full-load-types";
import { type ParsedUnit, parseUnit, toCanonical } from "@/lib/units/unit-text";

/** Engine channels of a log, one value a row in the units of `ENGINE_UNITS`; NaN = missing. */
export interface EngineRows {
  channels: Map<EngineChannel, Float64Array>;
  /** Target of manifold pressure, kPa, in the reference that its title or unit states; null reference: not said. */
  boostTarget: { values: Float64Array; reference: "absolute" | "gauge" | null } | null;
}

const BOOST_TARGET =
  /\b(boost|manifold|map|charge|ladedruck)\b.*\b(target|desired|setpoint|request(ed)?|soll)\b|\b(target|desired|setpoint|request(ed)?|soll)\b.*\b(boost|manifold|map|charge|ladedruck)\b/;
const INJECTOR_DUTY = /\binj(ector|ection)?s?\b.*\bduty\b/;
const INJECTOR_PULSE = /\binj(ector|ection)?s?\b.*\b(pulse|time|duration|pw|width)\b/;

/**
 * Picks the engine channels of a log. Known ones come by name; injector duty (%, or pulse width in ms with the engine speed,
 * one injection a cycle) and a target of manifold pressure by the titles of free columns whose unit fits.
 */
export function findEngineChannels({ channels }: LogTable): EngineRows {
  const found = new Map<EngineChannel, Float64Array>();
  for (const name of ENGINE_CHANNELS) {
    const known = channels.find(({ channel }) => channel === name);
    if (known && hasValues(known.values)) found.set(name, known.values);
  }
  const free = channels.filter(({ channel, values }) => channel === null && hasValues(values));
  const named = (pattern: RegExp, dimension: ParsedUnit["dimension"]) => {
    for (const channel of free) {
      const unit = parseUnit(channel.unit);
      if (unit?.dimension === dimension && pattern.test(titleOf(channel)))
        return { ...channel, parsed: unit };
    }
    return null;
  };
  const duty = named(INJECTOR_DUTY, "ratio");
  const pulse = duty ? null : named(INJECTOR_PULSE, "time");
  const speed = channels.find(({ channel }) => channel === "engine_speed");
  if (duty)
    found.set(
      "injector_duty",
      duty.values.map((value) => toCanonical(value, duty.parsed)),
    );
  else if (pulse && speed) {
    found.set(
      "injector_duty",
      pulse.values.map((value, i) =>
        injectorDutyPct(1000 * toCanonical(value, pulse.parsed), speed.values[i]),
      ),
    );
  }
  const target = named(BOOST_TARGET, "pressure");
  return {
    channels: found,
    boostTarget: target && {
      values: target.values.map((value) => toCanonical(value, target.parsed)),
      reference: target.parsed.reference ?? referenceInTitle(titleOf(target)),
    },
  };
}

function titleOf({ name, column }: LogChannel): string {
  return (name ?? column)
    .replace(/([a-z])([A-Z])/g, "$1 $2")
    .toLowerCase()
    .replace(/[^a-zäöü]+/g, " ")
    .trim();
}

function referenceInTitle(title: string): "absolute" | "gauge" | null {
  if (/\b(gauge|rel|relative)\b/.test(title)) return "gauge";
  return /\b(abs|absolute|map)\b/.test(title) ? "absolute" : null;
}

function hasValues(values: Float64Array): boolean {
  return values.some(Number.isFinite);
}
