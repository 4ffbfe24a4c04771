import type { StatedKey } from "@/lib/services/channel-keys/schema";

interface BoxColumn {
  usual: string;
  /** The title that the workshop's older recorder writes. */
  title: string;
  channel: string;
  unit: string;
}

/** Another recorder of the demo's workshop: short titles without units, semicolons, a decimal comma. */
const BOX: readonly BoxColumn[] = [
  { usual: "Wheel speed undriven [km/h]", title: "v_h", channel: "wheel_speed_undriven", unit: "km/h" },
  { usual: "Wheel speed driven [km/h]", title: "v_v", channel: "wheel_speed_driven", unit: "km/h" },
  { usual: "GPS speed [km/h]", title: "v_sat", channel: "gps_speed", unit: "km/h" },
  { usual: "Engine speed [rpm]", title: "Kurbel", channel: "engine_speed", unit: "1/min" },
  { usual: "Pedal position [%]", title: "Fahrerwunsch", channel: "pedal", unit: "%" },
  { usual: "Latitude [deg]", title: "Breite", channel: "latitude", unit: "deg" },
  { usual: "Longitude [deg]", title: "Laenge", channel: "longitude", unit: "deg" },
  { usual: "Altitude [m]", title: "Hoehe", channel: "altitude", unit: "m" },
  { usual: "Manifold pressure absolute [kPa]", title: "p_rohr", channel: "manifold_pressure", unit: "kPa" },
  { usual: "Lambda [-]", title: "Lam", channel: "lambda", unit: "1" },
  { usual: "Knock retard [°]", title: "Klopf", channel: "knock_retard", unit: "°" },
  { usual: "Intake air temperature [°C]", title: "T_an", channel: "intake_temperature", unit: "°C" },
  { usual: "Coolant temperature [°C]", title: "T_km", channel: "coolant_temperature", unit: "°C" },
  { usual: "Exhaust gas temperature [°C]", title: "T_abg", channel: "exhaust_temperature", unit: "°C" },
  {
    usual: "Longitudinal acceleration [m/s²]",
    title: "a_x",
    channel: "longitudinal_acceleration",
    unit: "m/s²",
  },
];
const TIME = { usual: "Time [s]", title: "Stempel" };

/** The same recording as the older recorder writes it. */
export function asOlderBox(csv: Buffer): Buffer {
  const [head = "", ...lines] = csv.toString("utf8").trimEnd().split("\n");
  const titles = new Map([TIME, ...BOX].map(({ usual, title }) => [usual, title]));
  const odd = head.split(",").map((usual) => titles.get(usual) ?? usual);
  const rows = lines.map((line) => line.replaceAll(",", ";").replaceAll(".", ","));
  return Buffer.from(`${[odd.join(";"), ...rows].join("\n")}\n`, "utf8");
}

/** What its columns are. */
export const OLDER_BOX_KEY: StatedKey = {
  time: { column: TIME.title, form: "s" },
  columns: Object.fromEntries(BOX.map(({ title, channel, unit }) => [title, { channel, unit }])),
};
