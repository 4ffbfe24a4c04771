import { FileRefusedError } from "@/lib/errors";
import { type LogChannel, type LogTable, ROAD_SPEEDS } from "@/lib/logs/types";

/** Below this top speed (1 km/h) a car has not moved; GPS noise at rest stays under it. */
const MOVED_MPS = 1 / 3.6;

/** Road speed channels of a log, best first: undriven wheel, GPS, driven wheel. */
function roadSpeedChannels(table: LogTable): LogChannel[] {
  return ROAD_SPEEDS.flatMap((name) => table.channels.filter((channel) => channel.channel === name));
}

/**
 * Asks whether a log carries a road speed that an analysis can stand on.
 * Throws FileRefusedError `no_speed_channel` or `speed_all_zero`.
 */
export function requireRoadSpeed(table: LogTable): LogChannel[] {
  const channels = roadSpeedChannels(table);
  if (channels.length === 0) {
    const inDoubt = table.problems.filter((p) =>
      ["unit_unknown", "unit_does_not_fit", "axle_drive_unknown"].includes(p.code),
    );
    throw new FileRefusedError(
      "no_speed_channel",
      `The log has no road speed channel (wheel speed or GPS speed).${inDoubt.length > 0 ? ` In doubt: ${inDoubt.map((p) => p.message).join(" ")}` : " Record one, or name the column in a channel key."}`,
    );
  }
  if (channels.every((channel) => !channel.values.some((value) => value > MOVED_MPS))) {
    throw new FileRefusedError(
      "speed_all_zero",
      `The road speed is zero throughout (${channels.map((channel) => `"${channel.column}"`).join(", ")}). Check the sensor or the logger's channel list.`,
    );
  }
  return channels;
}
