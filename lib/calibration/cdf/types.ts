/** A physical value of a values file: a number, a text, or null where the file's own text is no number (told as a problem). */
export type CdfValue = number | string | null;

export interface CdfAxis {
  /** STD_AXIS, COM_AXIS … as written. */
  category: string;
  /** Name of the instance whose values are the points; null where the points stand here. */
  reference: string | null;
  unit: string;
  /** Points in logical order; [] for a reference. */
  values: CdfValue[];
}

/** One SW-INSTANCE of an ASAM CDF 2.0 file. Cells run with x fastest, then y, then z. */
export interface CdfInstance {
  name: string;
  /** LONG-NAME. */
  text: string;
  /** As written; categories that are not known are plain values. */
  category: string;
  unit: string;
  /** Cells by axis; [] for one value. A shared rescale axis has [2, pairs]. */
  dims: number[];
  values: CdfValue[];
  axes: CdfAxis[];
  functions: string[];
}

/** What a CDF 2.0 file (CDFX) holds. */
export interface CdfFile {
  instances: CdfInstance[];
  /** What a person should know; nothing is in doubt. */
  notes: string[];
  /** Places where the file contradicts itself or a value can't be read; with the instance's name. */
  problems: string[];
}

/** Codes with which a values file is refused (FileRefusedError). */
export const CDF_REFUSALS = [
  "empty_file",
  "encoding_unknown",
  "not_text",
  "file_damaged",
  "not_cdf",
  "too_many_values",
] as const;
