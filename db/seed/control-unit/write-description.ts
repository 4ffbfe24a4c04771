import {
  type Axis,
  type FunctionName,
  type Item,
  pointsOf,
  SHARED_AXES,
  SPREAD_MOST_PAIRS,
} from "@/db/seed/control-unit/item";
import {
  addressOf,
  ITEMS,
  MEMORY,
  type Part,
  partsOf,
  partsOfAxis,
  SPREAD_PARTS,
} from "@/db/seed/control-unit/place";
import { SCALE_TABLES, SCALES, type Scale } from "@/db/seed/control-unit/scales";

const FUNCTIONS: Readonly<Record<FunctionName, string>> = {
  Boost: "Pressure in the manifold: asking for it and building it up",
  Fuel: "Air ratio, injection and the protection that rests on it",
  Ignition: "Ignition, knock and coils",
  Torque: "What the driver asks for and what the engine may give",
  Limiter: "Ends of speed and torque",
};

const hex = (address: number) => `0x${address.toString(16).toUpperCase()}`;
const quoted = (text: string) => `"${text}"`;

/** A record layout by what lies in it; equal records share one. */
interface Layout {
  name: string;
  lines: readonly string[];
}

function layoutOf(parts: readonly Part[], byColumn = false): Layout {
  const lines = parts.map(({ keyword, type }, at) => {
    const position = at + 1;
    if (keyword === "FNC_VALUES")
      return `${keyword} ${position} ${type} ${byColumn ? "COLUMN_DIR" : "ROW_DIR"} DIRECT`;
    if (keyword === "RESERVED") return `${keyword} ${position} BYTE`;
    if (keyword.startsWith("AXIS_RESCALE"))
      return `${keyword} ${position} ${type} ${SPREAD_MOST_PAIRS} INDEX_INCR DIRECT`;
    if (keyword.startsWith("AXIS_PTS")) return `${keyword} ${position} ${type} INDEX_INCR DIRECT`;
    return `${keyword} ${position} ${type}`;
  });
  const types = parts.filter(({ keyword }) => !keyword.startsWith("NO_")).map(({ type }) => type.slice(0, 2));
  const kind = parts.at(-1)?.keyword === "FNC_VALUES" ? "Values" : parts === SPREAD_PARTS ? "Spread" : "Axis";
  return { name: `${kind}_${types.join("_")}${byColumn ? "_columns" : ""}`, lines };
}

const itemLayout = (item: Item) => layoutOf(partsOf(item), item.byColumn);

function axisLines(axis: Axis): string[] {
  const words = {
    own: "STD_AXIS",
    shared: "COM_AXIS",
    fixed: "FIX_AXIS",
    rescaled: "RES_AXIS",
    curve: "CURVE_AXIS",
  };
  const most = axis.kind === "shared" ? SHARED_AXES[axis.name].most : pointsOf(axis).length;
  const scale = axis.kind === "curve" ? "NO_COMPU_METHOD" : axis.scale;
  const rests: string[] = [];
  if (axis.kind === "fixed") rests.push(axis.rule);
  if (axis.kind === "shared" || axis.kind === "rescaled") rests.push(`AXIS_PTS_REF ${axis.name}`);
  if (axis.kind === "curve") rests.push(`CURVE_AXIS_REF ${axis.name}`);
  return [
    `/begin AXIS_DESCR ${words[axis.kind]} ${axis.quantity} ${scale} ${most} ${axis.limits.join(" ")}`,
    ...rests.map((line) => `  ${line}`),
    "/end AXIS_DESCR",
  ];
}

const typeOf = ({ axes = [], dims, characters }: Item) =>
  characters ? "ASCII" : dims ? "VAL_BLK" : (["VALUE", "CURVE", "MAP", "CUBOID"] as const)[axes.length];

function itemLines(item: Item): string[] {
  const {
    name,
    text,
    scale,
    limits,
    extended,
    axes = [],
    dims,
    characters,
    derived,
    bitMask,
    readOnly,
  } = item;
  const address = derived?.kind === "virtual" ? "0x0" : hex(addressOf(name));
  const options: string[] = [`FORMAT "%8.${SCALES[scale].decimals}"`];
  if (extended) options.push(`EXTENDED_LIMITS ${extended.join(" ")}`);
  if (dims) options.push(`MATRIX_DIM ${dims.join(" ")}`);
  if (characters) options.push(`NUMBER ${characters.bytes}`);
  if (bitMask !== undefined) options.push(`BIT_MASK ${hex(bitMask)}`);
  if (readOnly) options.push("READ_ONLY");
  if (derived) {
    const keyword = derived.kind === "virtual" ? "VIRTUAL_CHARACTERISTIC" : "DEPENDENT_CHARACTERISTIC";
    options.push(`/begin ${keyword} ${quoted(derived.formula)} ${derived.inputs.join(" ")} /end ${keyword}`);
  }
  return [
    `/begin CHARACTERISTIC ${name} ${quoted(text)}`,
    `  ${typeOf(item)} ${address} ${itemLayout(item).name} 0 ${scale} ${limits.join(" ")}`,
    ...[...options, ...axes.flatMap(axisLines)].map((line) => `  ${line}`),
    "/end CHARACTERISTIC",
  ];
}

function sharedAxisLines(): string[] {
  const own = Object.entries(SHARED_AXES).map(([name, { text, quantity, scale, most, limits }]) => {
    const { name: layout } = layoutOf(partsOfAxis(name as keyof typeof SHARED_AXES));
    return `/begin AXIS_PTS ${name} ${quoted(text)} ${hex(addressOf(name))} ${quantity} ${layout} 0 ${scale} ${most} ${limits.join(" ")} /end AXIS_PTS`;
  });
  const spread = "Axis.Speed_spread";
  return [
    ...own,
    `/begin AXIS_PTS ${spread} "engine speed, few cells where little happens" ${hex(addressOf(spread))} engine_speed ${layoutOf(SPREAD_PARTS).name} 0 Speed_rpm ${SPREAD_MOST_PAIRS} 0 8000 /end AXIS_PTS`,
  ];
}

function layoutLines(): string[] {
  const axes = (Object.keys(SHARED_AXES) as (keyof typeof SHARED_AXES)[]).map((name) =>
    layoutOf(partsOfAxis(name)),
  );
  const layouts = [...ITEMS.map(itemLayout), ...axes, layoutOf(SPREAD_PARTS)];
  const unique = new Map(layouts.map((layout) => [layout.name, layout]));
  return Array.from(
    unique.values(),
    ({ name, lines }) => `/begin RECORD_LAYOUT ${name} ${lines.join(" ")} /end RECORD_LAYOUT`,
  );
}

function scaleLines(): string[] {
  const scales: [string, Scale][] = Object.entries(SCALES);
  return scales.map(
    ([name, { text, unit, decimals, method }]) =>
      `/begin COMPU_METHOD ${name} ${quoted(text)} ${method.type} "%8.${decimals}" ${quoted(unit)} ${method.rest} /end COMPU_METHOD`,
  );
}

/** What moves along the axes, each once, in the unit of its first axis. */
function measurementLines(): string[] {
  const quantities = new Map(ITEMS.flatMap(({ axes = [] }) => axes.map((axis) => [axis.quantity, axis])));
  return Array.from(quantities.values(), ({ quantity, scale, limits }) => {
    const words = quantity.replaceAll("_", " ");
    return `/begin MEASUREMENT ${quantity} ${quoted(words)} UWORD ${scale} 0 0 ${limits.join(" ")} /end MEASUREMENT`;
  });
}

function functionLines(): string[] {
  return Object.entries(FUNCTIONS).map(([name, text]) => {
    const members = ITEMS.filter(({ fn }) => fn === name).map((item) => item.name);
    return `/begin FUNCTION ${name} ${quoted(text)} /begin DEF_CHARACTERISTIC ${members.join(" ")} /end DEF_CHARACTERISTIC /end FUNCTION`;
  });
}

function memoryLines(): string[] {
  const segment = (what: { name: string; address: number; length: number }, type: string, text: string) =>
    `  /begin MEMORY_SEGMENT ${what.name} ${quoted(text)} ${type} FLASH INTERN ${hex(what.address)} ${hex(what.length)} -1 -1 -1 -1 -1 /end MEMORY_SEGMENT`;
  const { code, data, epk } = MEMORY;
  return [
    '/begin MOD_COMMON "invented" BYTE_ORDER MSB_LAST ALIGNMENT_BYTE 1 ALIGNMENT_WORD 2 ALIGNMENT_LONG 4 ALIGNMENT_FLOAT32_IEEE 4 /end MOD_COMMON',
    `/begin MOD_PAR "invented" EPK ${quoted(epk.text)} ADDR_EPK ${hex(epk.address)}`,
    segment(code, "CODE", "what the unit does"),
    segment(data, "DATA", "what it does it by"),
    "/end MOD_PAR",
  ];
}

/** The description of the invented control unit, ASAP2 1.6, UTF-8 with unix line ends. Same input, same bytes. */
export function writeDescription(): Buffer {
  const body = [
    ...memoryLines(),
    ...scaleLines(),
    ...SCALE_TABLES,
    ...layoutLines(),
    ...measurementLines(),
    ...sharedAxisLines(),
    ...ITEMS.flatMap(itemLines),
    ...functionLines(),
  ];
  const lines = [
    "/* A control unit that nobody builds, described for the sample data. */",
    "ASAP2_VERSION 1 61",
    '/begin PROJECT Marlin_sample "Sample data: an invented control unit"',
    '  /begin MODULE Engine "Engine of the Marlin hatch 2.0 turbo (invented)"',
    ...body.map((line) => `    ${line}`),
    "  /end MODULE",
    "/end PROJECT",
  ];
  return Buffer.from(`${lines.join("\n")}\n`, "utf8");
}
