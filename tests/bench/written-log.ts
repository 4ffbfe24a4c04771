/** How a log is written out for the bench. */
export interface WrittenForm {
  delimiter: "," | ";";
  decimal: "." | ",";
}

const TITLES = [
  "Time [s]",
  "GPS speed [km/h]",
  "Engine speed [rpm]",
  "Pedal [%]",
  "Throttle [%]",
  "Manifold pressure [kPa]",
  "Lambda [-]",
  "Ignition advance [°]",
  "Intake temperature [°C]",
  "Coolant temperature [°C]",
  "Exhaust temperature [°C]",
  "Latitude [deg]",
  "Longitude [deg]",
  "Altitude [m]",
  "Fuel pressure [bar]",
  "Gear",
];
/** Blocks of this many rows are written with one block of text, only the time differs. */
const BLOCK_ROWS = 500;

function tails(): string[] {
  return Array.from({ length: BLOCK_ROWS }, (_, i) => {
    const wave = Math.sin(i / 40);
    return [
      (90 + 60 * wave).toFixed(2),
      (4000 + 2500 * wave).toFixed(0),
      (50 + 49 * wave).toFixed(1),
      (48 + 47 * wave).toFixed(1),
      (130 + 90 * wave).toFixed(2),
      (0.95 + 0.1 * wave).toFixed(3),
      (18 - 9 * wave).toFixed(2),
      (31 + wave).toFixed(1),
      (88 + wave).toFixed(1),
      (700 + 120 * wave).toFixed(1),
      (48.1 + i * 1e-5).toFixed(7),
      (11.5 - i * 1e-5).toFixed(7),
      (512 + 3 * wave).toFixed(1),
      (4.05 + 0.2 * wave).toFixed(3),
      `${2 + (i % 3)}`,
    ].join(";");
  });
}

/** A log of 16 channels at 100 Hz, at least `sizeBytes` long, piece by piece. */
export function* writtenLog(sizeBytes: number, { delimiter, decimal }: WrittenForm): Generator<Buffer> {
  const dressed = (text: string) => text.replaceAll(".", decimal).replaceAll(";", delimiter);
  const ends = tails().map((tail) => `${delimiter}${dressed(tail)}\n`);
  yield Buffer.from(`${TITLES.join(delimiter)}\n`);
  let written = 0;
  for (let row = 0; written < sizeBytes; row += BLOCK_ROWS) {
    let text = "";
    for (let i = 0; i < BLOCK_ROWS; i++) text += dressed(((row + i) / 100).toFixed(2)) + ends[i];
    const block = Buffer.from(text);
    written += block.length;
    yield block;
  }
}
