import { FileRefusedError } from "@/lib/errors";
import type { RawColumn } from "@/lib/logs/channels/channel-values";
import { decodeText } from "@/lib/logs/delimited/decode-text";
import { type GpxPoint, type GpxPoints, readGpxPoints } from "@/lib/logs/gpx/gpx-points";
import { positionSpeed } from "@/lib/logs/gpx/position-speed";
import { joinGroups } from "@/lib/logs/join-groups";
import {
  type ChannelKey,
  type LogProblem,
  type LogTable,
  MOST_REFUSED_LISTED,
  type RefusedRow,
} from "@/lib/logs/types";

/**
 * Reads a GPX track (1.0 and 1.1): positions, elevations, times, and speeds where the file states them. Without a stated speed one is
 * derived from the positions, and a problem entry says so. A point without a time is refused with its line; `listAtMost` are listed. Throws FileRefusedError.
 */
export function readGpx(bytes: Uint8Array, key: ChannelKey, listAtMost = MOST_REFUSED_LISTED): LogTable {
  const { text, encoding } = decodeText(bytes, key.encoding);
  const read = readGpxPoints(text);
  const refused: RefusedRow[] = [];
  let refusedCount = 0;
  const points = read.points.filter((point) => {
    if (!Number.isNaN(point.timeMs)) return true;
    refusedCount++;
    const reason = point.timeText === "" ? "has no time" : "has no readable time";
    if (refused.length < listAtMost)
      refused.push({ row: point.line, column: "time", raw: point.timeText, reason });
    return false;
  });
  if (points.length === 0) {
    throw new FileRefusedError(
      read.points.length === 0 ? "no_data_rows" : "no_time_column",
      read.points.length === 0
        ? `The GPX file holds no track point${read.otherPoints > 0 ? `, only ${read.otherPoints} waypoints or route points` : ""}. Export the recorded track.`
        : `None of the ${read.points.length} track points states a time. Export the track with times.`,
    );
  }
  const zeroMs = points[0].timeMs;
  const timeS = Float64Array.from(points, (point) => (point.timeMs - zeroMs) / 1000);
  const problems = tell(read, refusedCount, refused);
  const columns = columnsOf(points, timeS, problems);
  return joinGroups([{ name: "the track", timeColumn: "time", timeS, columns }], {
    format: "gpx",
    encoding,
    rowsRefused: refused,
    leftOut: [],
    problems,
    timeForm: "iso",
    from: (startS) => new Date(zeroMs + Math.round(1000 * startS)).toISOString(),
    key,
  });
}

function columnsOf(points: readonly GpxPoint[], timeS: Float64Array, problems: LogProblem[]): RawColumn[] {
  const column = (title: string, unit: string, value: (point: GpxPoint) => number): RawColumn => ({
    title,
    unitRowText: unit,
    values: Float64Array.from(points, value),
  });
  const outside = (value: number, limit: number) => (Math.abs(value) <= limit ? value : Number.NaN);
  const latitude = column("latitude", "deg", (point) => outside(point.latitude, 90));
  const longitude = column("longitude", "deg", (point) => outside(point.longitude, 180));
  const columns = [latitude, longitude];
  const isThere = ({ values }: RawColumn) => values.some((value) => !Number.isNaN(value));
  const elevation = column("elevation", "m", (point) => point.elevationM);
  if (isThere(elevation)) columns.push(elevation);
  const stated = column("GPS speed", "m/s", (point) => point.speedMps);
  if (isThere(stated)) return [stated, ...columns];
  const segment = points.map((point) => point.segment);
  problems.push({
    code: "speed_from_positions",
    message:
      "The track states no speed; it was derived from the positions, which is too coarse for a decision. Record the receiver's own speed.",
  });
  const values = positionSpeed(timeS, latitude.values, longitude.values, segment);
  return [{ title: "GPS speed derived from positions", unitRowText: "m/s", values }, ...columns];
}

function tell(read: GpxPoints, refusedCount: number, refused: readonly RefusedRow[]): LogProblem[] {
  const problems: LogProblem[] = [];
  if (refusedCount > 0) {
    problems.push({
      code: "rows_refused",
      message: `${refusedCount} of ${read.points.length} track points were refused, the first in line ${refused[0].row}: it ${refused[0].reason}.`,
    });
  }
  if (read.segments > 1)
    problems.push({
      code: "several_segments",
      message: `The file holds ${read.segments} segments in ${read.tracks} tracks; they were joined in time.`,
    });
  if (read.otherPoints > 0)
    problems.push({
      code: "points_left_out",
      message: `${read.otherPoints} waypoints or route points are no recording and were left out.`,
    });
  if (read.isCutOff)
    problems.push({
      code: "file_cut_off",
      message: `The file ends in the middle; the ${read.points.length} whole track points before that were read.`,
    });
  return problems;
}
