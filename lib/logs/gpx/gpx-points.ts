import { SaxesParser } from "saxes";
import { FileRefusedError } from "@/lib/errors";

/** One track point as written; NaN = not stated. */
export interface GpxPoint {
  line: number;
  latitude: number;
  longitude: number;
  elevationM: number;
  /** Milliseconds since 1970. */
  timeMs: number;
  /** As written, for messages; empty when there is none. */
  timeText: string;
  speedMps: number;
  /** Number of the segment, counted through the file. */
  segment: number;
}

export interface GpxPoints {
  points: GpxPoint[];
  tracks: number;
  segments: number;
  /** Waypoints and route points, which are no recording. */
  otherPoints: number;
  /** The text ended before its last element did. */
  isCutOff: boolean;
}

/** Real tracks nest seven deep; a made-up file must not claim memory by depth. */
const DEEPEST = 64;
const LONGEST_TEXT = 100;
const PIECE = 1 << 16;
/** Points that are held at once: ten hours at 25 a second. */
const MOST_POINTS = 1_000_000;

class CutOff extends Error {}

/** ISO 8601 with date, `Z` or an offset; a time without a zone is UTC, as GPX asks. NaN when it is no time. */
export function gpxMilliseconds(text: string): number {
  const match = /^(-?\d{4})-(\d{2})-(\d{2})T(\d{2}):(\d{2}):(\d{2})(\.\d+)?\s*(Z|[+-]\d{2}:?\d{2})?$/i.exec(
    text.trim(),
  );
  if (!match) return Number.NaN;
  const [year, month, day, hour, minute, second] = match.slice(1, 7).map(Number);
  if (month < 1 || month > 12 || day < 1 || day > 31 || hour > 24 || minute > 59 || second > 60)
    return Number.NaN;
  const zone = /^([+-])(\d{2}):?(\d{2})$/.exec(match[8] ?? "");
  const shiftMin = zone ? (zone[1] === "-" ? -1 : 1) * (Number(zone[2]) * 60 + Number(zone[3])) : 0;
  return Date.UTC(year, month - 1, day, hour, minute - shiftMin, second) + 1000 * Number(match[7] ?? 0);
}

function decimal(text: string | undefined): number {
  const trimmed = (text ?? "").trim();
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(trimmed) ? Number(trimmed) : Number.NaN;
}

/**
 * Reads the track points of a GPX text (1.0 and 1.1). Entities of its own are an error, nothing outside is fetched. A text that ends
 * too early gives the points before its end. Throws FileRefusedError `file_damaged`, `too_many_values`.
 */
export function readGpxPoints(text: string): GpxPoints {
  const parser = new SaxesParser({ xmlns: false, position: true });
  const result: GpxPoints = { points: [], tracks: 0, segments: 0, otherPoints: 0, isCutOff: false };
  const path: string[] = [];
  let point: GpxPoint | null = null;
  let gathered = "";
  let atEnd = false;

  parser.on("error", (error) => {
    if (atEnd) throw new CutOff();
    throw new FileRefusedError(
      "file_damaged",
      `The GPX file is no well-formed XML (${error.message.slice(0, 120)}). Export the track again.`,
    );
  });
  parser.on("doctype", () => {
    throw new FileRefusedError(
      "file_damaged",
      "The GPX file brings its own document type, which GPX does not have. Export the track again.",
    );
  });
  parser.on("opentag", ({ name, attributes }) => {
    const local = name.slice(name.indexOf(":") + 1);
    if (path.length >= DEEPEST)
      throw new FileRefusedError("file_damaged", `The GPX file nests elements more than ${DEEPEST} deep.`);
    path.push(local);
    gathered = "";
    if (local === "trk") result.tracks++;
    if (local === "trkseg") result.segments++;
    if (local === "wpt" || local === "rtept") result.otherPoints++;
    if (local !== "trkpt") return;
    point = {
      line: parser.line,
      latitude: decimal(attributes.lat),
      longitude: decimal(attributes.lon),
      elevationM: Number.NaN,
      timeMs: Number.NaN,
      timeText: "",
      speedMps: Number.NaN,
      segment: result.segments,
    };
  });
  parser.on("text", (piece) => {
    if (point && gathered.length < LONGEST_TEXT) gathered += piece.slice(0, LONGEST_TEXT);
  });
  parser.on("closetag", () => {
    const local = path.pop();
    if (!point) return;
    const inPoint = path[path.length - 1] === "trkpt";
    if (local === "trkpt") {
      if (result.points.length >= MOST_POINTS)
        throw new FileRefusedError(
          "too_many_values",
          `The GPX file holds more than ${MOST_POINTS} track points; a log of one run has far fewer. Export only the time that is needed.`,
        );
      result.points.push(point);
      point = null;
    } else if (local === "ele" && inPoint) point.elevationM = decimal(gathered);
    else if (local === "time" && inPoint) {
      point.timeText = gathered.trim();
      point.timeMs = gpxMilliseconds(gathered);
    } else if (local === "speed") point.speedMps = decimal(gathered);
    gathered = "";
  });
  try {
    for (let from = 0; from < text.length; from += PIECE) parser.write(text.slice(from, from + PIECE));
    atEnd = true;
    parser.close();
  } catch (error) {
    if (!(error instanceof CutOff)) throw error;
    result.isCutOff = true;
  }
  return result;
}
