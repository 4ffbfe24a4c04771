/** How a record is called, e.g. "Record 010". */
export function recordName(recordNumber: number): string {
  return `Record ${String(recordNumber).padStart(3, "0")}`;
}
