import { createHash } from "node:crypto";
import type { Description } from "@/lib/calibration/a2l/types";
import type { ValuesCheck } from "@/lib/calibration/cdf/check-values";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { imageIdentity } from "@/lib/calibration/image/image-identity";
import { type CalibrationImage, formatAddress } from "@/lib/calibration/image/types";
import type { ImageReading } from "@/lib/calibration/values/types";

interface Said {
  notRead: { name: string; reason: string }[];
  problems: string[];
}

const sha256 = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");

/** What an image file holds: container, SHA-256 of the file, identity of the content, its segments. */
export function imageReport(image: CalibrationImage, file: Uint8Array) {
  return {
    container: image.container,
    sha256: sha256(file),
    identity: imageIdentity(image),
    segments: image.segments.map(({ address, bytes }) => ({
      address: formatAddress(address),
      length: bytes.length,
      sha256: sha256(bytes),
    })),
    notes: image.notes.map(({ message }) => message),
  };
}

/** What a description says of itself: blocks that were not read, included files that were not given, what a person should know. */
export function descriptionReport({ notRead, missingIncludes, notes }: Description): Said {
  return {
    notRead: notRead.map(({ keyword, name, reason }) => ({ name, reason: `${keyword}: ${reason}` })),
    problems: [
      ...missingIncludes.map(
        (name) => `The description includes ${name}, which was not given. Name it behind --description.`,
      ),
      ...notes.map(
        ({ message, file, line }) => `${message} (${file}${line === null ? "" : `, line ${line}`})`,
      ),
    ],
  };
}

function changeReport(change: CharacteristicChange) {
  const { before, after } = change;
  const texts =
    change.type === "ASCII"
      ? [
          {
            index: [],
            axis: [],
            before: before?.characters ?? null,
            after: after?.characters ?? null,
            limit: "ok",
          },
        ]
      : [];
  return {
    name: change.name,
    type: change.type,
    address: formatAddress(change.address),
    unit: change.unit,
    kind: change.kind,
    cells: change.cells,
    changed: change.changed,
    axis_changed: change.axisChanged,
    shape_changed: change.shapeChanged,
    functions: change.functions,
    effect: change.effect,
    changes: [
      ...texts,
      ...change.changes.map(({ index, before: from, after: to, limit }) => ({
        index,
        axis: (after?.axes ?? []).map(({ points }, k) => points[index[k]] ?? null),
        before: from,
        after: to,
        limit,
      })),
    ],
    ...(change.axisChanged && before && after
      ? {
          axes_before: before.axes.map(({ points }) => points),
          axes_after: after.axes.map(({ points }) => points),
        }
      : {}),
  };
}

/** The change set in the form of the command line: snake_case, addresses in hex, units in members. */
export function changesReport({
  a,
  b,
  changes,
  descriptions,
}: {
  a: ReturnType<typeof imageReport>;
  b: ReturnType<typeof imageReport>;
  changes: ChangeSet;
  descriptions: readonly Said[];
}) {
  return {
    a,
    b,
    identical: changes.identical,
    read_by: changes.readBy,
    changed_bytes: changes.changedBytes,
    changed_ranges: changes.changedRanges,
    characteristics: changes.characteristics.map(changeReport),
    uncovered: changes.uncovered.map((range) => ({
      address: formatAddress(range.address),
      length: range.length,
      segment: range.segment,
      kind: range.kind,
      before: range.before,
      after: range.after,
      context_address: formatAddress(range.contextAddress),
    })),
    uncovered_ranges: changes.uncoveredRanges,
    uncovered_bytes: changes.uncoveredBytes,
    not_read: [
      ...changes.notRead.map(({ name, reason }) => ({ name, reason })),
      ...descriptions.flatMap(({ notRead }) => notRead),
    ],
    problems: [...changes.problems, ...descriptions.flatMap(({ problems }) => problems)],
  };
}

/** All values of an image by name, physical and raw, x fastest. */
export function valuesReport(reading: ImageReading, description: Said) {
  return {
    values: Object.fromEntries(
      reading.characteristics.map((one) => [
        one.name,
        {
          type: one.type,
          address: formatAddress(one.address),
          unit: one.unit,
          values: one.values,
          raw: one.raw,
          dims: one.dims,
          axes: one.axes.map(({ points }) => points),
          ...(one.characters === null ? {} : { text: one.characters }),
        },
      ]),
    ),
    epk: reading.epk,
    not_read: [...reading.notRead.map(({ name, reason }) => ({ name, reason })), ...description.notRead],
    problems: [...reading.problems, ...description.problems],
  };
}

/** How the image stands to a values file: counts first, then what differs and what could not be compared. */
export function cdfReport(check: ValuesCheck) {
  const { differing, otherShape, otherUnit, notInImage, notReadable, notInFile } = check;
  return {
    in_file: check.inFile,
    compared: check.compared,
    equal: check.equal,
    values: check.values,
    different_values: differing.count,
    differences: differing.first.map(({ decimals: _, ...said }) => said),
    other_shape_count: otherShape.count,
    other_shape: otherShape.first,
    other_unit_count: otherUnit.count,
    other_unit: otherUnit.first,
    not_in_image_count: notInImage.count,
    not_in_image: notInImage.first,
    not_readable_count: notReadable.count,
    not_readable: notReadable.first,
    not_in_file_count: notInFile.count,
    not_in_file: notInFile.first,
    problems: check.problems,
    notes: check.notes,
  };
}
