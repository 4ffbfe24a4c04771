import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import type { Sensors, SimulatedCar } from "@/lib/simulate/types";

/** An invented hatch; nobody's real vehicle. */
export const HATCH: SimulatedCar = {
  massKg: 1438,
  radiusM: 0.3105,
  totalRatio: 5.46,
  efficiency: 0.952,
  engineInertiaKgm2: 0.168,
  wheelInertiaKgm2: 4.2,
  rolling: 0.0106,
  rollingV2: 0.000052,
  dragAreaM2: 0.671,
  drivelineNm: 5.2,
  drivelineNmPerMps: 0.11,
  slipStiffnessN: 400_000,
  startRpm: 1650,
  redlineRpm: 6600,
  boostLag: { lowS: 0.5, highS: 0.14, base: 0.54 },
  torque: [
    [1400, 236],
    [1700, 296],
    [2000, 322],
    [2600, 334],
    [3200, 336],
    [4200, 329],
    [5000, 310],
    [5600, 289],
    [6100, 263],
    [6700, 226],
  ],
};

/** What its workshop knows of it. */
export const HATCH_SHEET: VehicleSheetFigures = {
  label: "Marlin hatch 2.0 turbo, front drive, 6-speed manual (sample)",
  engine: "spark ignition",
  aspiration: "turbo",
  drive: "FWD",
  displacementL: 2,
  massPartsKg: [
    { part: "car as weighed, half tank", value: 1281, uncertainty: 6 },
    { part: "driver and recorder", value: 152, uncertainty: 2 },
    { part: "recorder, warning triangle, tools", value: 5, uncertainty: 1 },
  ],
  tyre: "225/40 R18",
  rollingCircumferenceM: null,
  gearRatios: [3.62, 2.11, 1.456, 1.09, 0.88, 0.73],
  finalDrive: 3.75,
  speedAtRpm: { gear: 3, rpm: 3000, speedKmh: 64.3 },
  idleRpm: 820,
  redlineRpm: 6600,
  engineInertiaKgm2: { value: 0.168, uncertainty: 0.02 },
  wheelInertiaKgm2: { value: 4.2, uncertainty: 0.3 },
  meshEfficiency: { value: 0.952, uncertainty: 0.01 },
  fuelQuantityMgPerLCycle: null,
};

/** The workshop's recorder: 25 rows a second, wheels, satellites and engine. */
export const RECORDER: Sensors = {
  rateHz: 25,
  undrivenWheel: true,
  drivenWheel: true,
  gps: true,
  engineSpeed: true,
  pedal: true,
  position: true,
  accelerometer: true,
  wheelStepKmh: 0.01,
  wheelNoiseKmh: 0.03,
  wheelScale: 1.002,
  gpsHz: 10,
  gpsNoiseKmh: 0.1,
  gpsLagS: 0.15,
  rpmStep: 1,
  rpmNoise: 2,
  rpmLagS: 0.03,
  shuffleRpm: 25,
};
