import type { StatedKey } from "@/lib/services/channel-keys/schema";
import { pullLog } from "@/tests/support/road-side";

/** Columns of the test car's pull that the logs below carry: usual title, and one that no reader can know. */
const TITLES: readonly [string, string][] = [
  ["Time [s]", "Stempel"],
  ["Wheel speed undriven [km/h]", "Rad h"],
  ["Engine speed [rpm]", "Kurbel"],
  ["Pedal position [%]", "Fahrerwunsch"],
  ["Manifold pressure [kPa]", "P1"],
];

/** What the odd titles mean. */
export const ODD_KEY: StatedKey = {
  time: { column: "Stempel", form: "s" },
  columns: {
    "Rad h": { channel: "wheel_speed_undriven", unit: "km/h" },
    Kurbel: { channel: "engine_speed", unit: "1/min" },
    Fahrerwunsch: { channel: "pedal", unit: "%" },
    P1: { channel: "manifold_pressure", unit: "kPa" },
  },
};

/** Five columns of the pull with the given titles, as a semicolon table with a decimal comma. */
function fiveColumns(titles: readonly string[], copy: number): Buffer {
  const [head = "", ...lines] = pullLog().toString("utf8").trim().split("\n");
  const all = head.split(",");
  const at = TITLES.map(([usual]) => all.indexOf(usual));
  const rows = lines.map((line) => {
    const cells = line.split(",");
    return at.map((index) => (cells[index] ?? "").replace(".", ",")).join(";");
  });
  return Buffer.from(`${[titles.join(";"), ...rows].join("\n")}\n${"\n".repeat(copy)}`);
}

/** The pull under titles that no reader can know. `copy` changes the fingerprint, never what it says. */
export const oddLog = (copy = 0): Buffer =>
  fiveColumns(
    TITLES.map(([, odd]) => odd),
    copy,
  );

/** The same under its usual titles. */
export const plainLog = (copy = 0): Buffer =>
  fiveColumns(
    TITLES.map(([usual]) => usual),
    copy,
  );
