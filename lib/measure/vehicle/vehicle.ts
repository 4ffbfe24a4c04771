import type { CampaignVehicle } from "@/lib/measure/types";
import { INCH_M, KMH_MPS, RPM_RADPS } from "@/lib/units/constants";

/** A figure with its standard uncertainty and where it comes from. */
export interface StatedFigure {
  value: number;
  uncertainty: number;
  source: string;
}

/** A tyre by its marking. */
export interface Tyre {
  widthM: number;
  aspect: number;
  rimM: number;
  construction: "radial" | "bias";
  outerDiameterM: number;
  /** Way per turn at 60 km/h and full load. */
  circumferenceM: number;
}

const MARKING = /^\s*(?:P|LT)?\s*(\d{3})\s*\/\s*(\d{2,3})\s*(?:Z?\s*(R|-|D|B))\s*F?\s*(\d{2}(?:[.,]\d)?)/i;

/**
 * Reads a metric tyre marking (ISO 4000-1 form, "225/40 R18"). Circumference = 3.05 × outer diameter for a radial tyre,
 * 2.99 for a bias tyre (ETRTO, quoted on a public page; at full load and 60 km/h). Null when it is not such a marking.
 */
export function readTyreMarking(marking: string): Tyre | null {
  const match = MARKING.exec(marking);
  if (!match) return null;
  const widthM = Number(match[1]) / 1000;
  const aspect = Number(match[2]) / 100;
  const rimM = Number((match[4] ?? "").replace(",", ".")) * INCH_M;
  const construction = match[3]?.toUpperCase() === "R" ? "radial" : "bias";
  const outerDiameterM = 2 * widthM * aspect + rimM;
  return {
    widthM,
    aspect,
    rimM,
    construction,
    outerDiameterM,
    circumferenceM: (construction === "radial" ? 3.05 : 2.99) * outerDiameterM,
  };
}

/** Circumference at speed: grows by 1/10 000 for each km/h above 60 (WdK, quoted on a public page). */
export function circumferenceAtSpeed(circumferenceM: number, speedMps: number): number {
  return circumferenceM * (1 + (speedMps * 3.6 - 60) / 10_000);
}

/** Engine speed in 1/min at a road speed without slip. `ratio` = gear × final drive. */
export function engineSpeedRpm(speedMps: number, ratio: number, circumferenceM: number): number {
  return (60 * speedMps * ratio) / circumferenceM;
}

/** Road speed in m/s at an engine speed without slip: V[km/h] = 0.06 n CR/ratio (arrêté of 27 March 1979, art. 2, France). */
export function roadSpeedMps(rpm: number, ratio: number, circumferenceM: number): number {
  return (rpm * circumferenceM) / (60 * ratio);
}

/** Power in W of a torque in N·m at an engine speed in 1/min. */
export function shaftPowerW(torqueNm: number, rpm: number): number {
  return torqueNm * rpm * RPM_RADPS;
}

/** Torque in N·m that makes a power in W at an engine speed in 1/min. */
export function shaftTorqueNm(powerW: number, rpm: number): number {
  return powerW / (rpm * RPM_RADPS);
}

/**
 * Way per turn of the driven wheels, in m. Standard uncertainty: as typed; else 0.5 % of a measured one or of a speed read off,
 * 1.5 % of a tyre marking (wear, load, pressure) [common practice, no source].
 */
export function rollingCircumference(vehicle: CampaignVehicle): StatedFigure | null {
  const stated = vehicle.rolling_circumference_m;
  if (stated) {
    const uncertainty = vehicle.rolling_circumference_uncertainty_m ?? 0.005 * stated;
    return { value: stated, uncertainty, source: "vehicle sheet" };
  }
  const read = vehicle.speed_at_rpm;
  const gear = read ? vehicle.gear_ratios?.[read.gear - 1] : undefined;
  if (read && gear && vehicle.final_drive) {
    const value = (read.speed_kmh * KMH_MPS * 60 * gear * vehicle.final_drive) / read.rpm;
    return { value, uncertainty: 0.005 * value, source: "speed read off at an engine speed" };
  }
  const tyre = vehicle.tyre ? readTyreMarking(vehicle.tyre) : null;
  if (!tyre) return null;
  return { value: tyre.circumferenceM, uncertainty: 0.015 * tyre.circumferenceM, source: "tyre marking" };
}

/**
 * Engine speed per road speed in one gear, 1/min per m/s. A speed read off at an engine speed wins over ratio and tyre;
 * another gear follows by the ratio of the gears. Null when the sheet does not tell; `gear` counts from 1.
 */
export function rpmPerMps(vehicle: CampaignVehicle, gear: number | null | undefined): StatedFigure | null {
  const read = vehicle.speed_at_rpm;
  if (read) {
    const perMps = read.rpm / (read.speed_kmh * KMH_MPS);
    if (gear == null || gear === read.gear) {
      return gear == null
        ? null
        : { value: perMps, uncertainty: 0.005 * perMps, source: "speed read off at an engine speed" };
    }
    const [own, other] = [vehicle.gear_ratios?.[gear - 1], vehicle.gear_ratios?.[read.gear - 1]];
    if (own && other) {
      const value = (perMps * own) / other;
      return {
        value,
        uncertainty: 0.005 * value,
        source: "speed read off at an engine speed in another gear",
      };
    }
  }
  const ratio = gear == null ? undefined : vehicle.gear_ratios?.[gear - 1];
  const circumference = rollingCircumference(vehicle);
  if (!ratio || !vehicle.final_drive || !circumference) return null;
  const value = (60 * ratio * vehicle.final_drive) / circumference.value;
  return {
    value,
    uncertainty: (value * circumference.uncertainty) / circumference.value,
    source: circumference.source,
  };
}

/** Rotating inertia and mesh efficiency that a result stands on; stated figures win over defaults by class. */
export interface DrivelineFigures {
  /** Sum of all wheels, kg·m². */
  wheelInertia: StatedFigure;
  /** Crankshaft, flywheel, clutch, kg·m². */
  engineInertia: StatedFigure;
  /** Loaded meshes only: the drag of the turning driveline is in the coast-down already. */
  meshEfficiency: StatedFigure;
}

const CLASS_DEFAULT = "default by class (common practice, no source)";
/** Transaxle: two helical meshes. Propeller shaft: with a hypoid. All wheels: with a transfer. Mesh ranges: Gear Technology, Sept 2012. */
const MESH_EFFICIENCY = { FWD: [0.96, 0.015], RWD: [0.94, 0.02], AWD: [0.93, 0.025] } as const;

/** A mass that nobody stated an uncertainty of: 1.5 % [common practice, no source]. */
const MASS_SHARE = 0.015;

/** Test mass in kg, `massKg` where a run has its own, with its standard uncertainty. */
export function testMass(vehicle: CampaignVehicle, massKg = vehicle.mass_kg): StatedFigure {
  const typed = vehicle.mass_uncertainty_kg;
  return typed == null
    ? { value: massKg, uncertainty: MASS_SHARE * massKg, source: CLASS_DEFAULT }
    : { value: massKg, uncertainty: typed, source: "vehicle sheet" };
}

/**
 * Figures of the driveline. Defaults: wheels 4.5 kg·m² at 0.31 m rolling radius, growing with r⁴, ± 25 %;
 * engine 0.10 + 0.035/l (spark) or 0.12 + 0.05/l (compression ignition) times litres, ± 35 %, 2.0 l / 2.5 l when not known.
 * A typed figure without an uncertainty: inertias ± 5 %, efficiency ± 1 % [common practice, no source].
 */
export function drivelineFigures(vehicle: CampaignVehicle): DrivelineFigures {
  const radiusM = (rollingCircumference(vehicle)?.value ?? 1.95) / (2 * Math.PI);
  const wheel = 4.5 * (radiusM / 0.31) ** 4;
  const spark = vehicle.engine === "spark ignition";
  const litres = vehicle.displacement_l ?? (spark ? 2 : 2.5);
  const engine = spark ? 0.1 + 0.035 * litres : 0.12 + 0.05 * litres;
  const [mesh, meshUncertainty] = MESH_EFFICIENCY[vehicle.drive];
  type Typed = number | null | undefined;
  const figure = (stated: Typed, typed: Typed, share: number, value: number, uncertainty: number) =>
    stated == null
      ? { value, uncertainty, source: CLASS_DEFAULT }
      : { value: stated, uncertainty: typed ?? share * stated, source: "vehicle sheet" };
  const { wheel_inertia_uncertainty_kgm2: typedWheel, engine_inertia_uncertainty_kgm2: typedEngine } =
    vehicle;
  return {
    wheelInertia: figure(vehicle.wheel_inertia_kgm2, typedWheel, 0.05, wheel, 0.25 * wheel),
    engineInertia: figure(vehicle.engine_inertia_kgm2, typedEngine, 0.05, engine, 0.35 * engine),
    meshEfficiency: figure(
      vehicle.mesh_efficiency,
      vehicle.mesh_efficiency_uncertainty,
      0.01,
      mesh,
      meshUncertainty,
    ),
  };
}

/** Effective mass in kg, by part: test mass, wheels ΣJw/r², engine Je (i/r)². */
export function effectiveMassKg(
  massKg: number,
  wheelInertiaKgm2: number,
  engineInertiaKgm2: number,
  ratio: number,
  radiusM: number,
): { wheelsKg: number; engineKg: number; totalKg: number } {
  const wheelsKg = wheelInertiaKgm2 / (radiusM * radiusM);
  const engineKg = (engineInertiaKgm2 * ratio * ratio) / (radiusM * radiusM);
  return { wheelsKg, engineKg, totalKg: massKg + wheelsKg + engineKg };
}

/** Power at the wheels in W: ((m + ΣJw/r²) a + F road + F grade) v. */
export function wheelPowerW(
  massWithWheelsKg: number,
  accelMps2: number,
  forceN: number,
  speedMps: number,
): number {
  return (massWithWheelsKg * accelMps2 + forceN) * speedMps;
}

/** Crank estimate in W: wheel power over the mesh efficiency plus what the engine's own inertia takes, Je (i/r)² a v. */
export function crankPowerW(
  wheelW: number,
  meshEfficiency: number,
  engineMassKg: number,
  accelMps2: number,
  speedMps: number,
): number {
  return wheelW / meshEfficiency + engineMassKg * accelMps2 * speedMps;
}
