import type { LogTable } from "@/lib/logs/types";
import { standardAtmosphere } from "@/lib/measure/air/air-density";
import { fixed } from "@/lib/measure/judge/words";
import type { Note, RunWeather } from "@/lib/measure/types";
import { median, quantile } from "@/lib/signal/statistics";

/** Weather moves the pressure by up to this around the standard one of a height [common practice, no source], hPa. */
const WEATHER_HPA = 45;
/** Intake air is never colder than the air outside; sensors and lags allowed for, K. */
const COLDER_K = 8;

/** Findings about typed weather: missing, a pressure that does not belong to the height, a temperature above the intake air's. */
export function weatherNotes(table: LogTable, weather: RunWeather | null | undefined): Note[] {
  if (!weather) {
    return [
      {
        code: "weather_missing",
        consequence: "warned",
        message:
          "No weather is typed for this run: a weather factor can't be had, and the air density is taken as 1.20 kg/m³. Read temperature, pressure and humidity at the car.",
      },
    ];
  }
  const notes: Note[] = [];
  const values = (name: string) => table.channels.find((c) => c.channel === name)?.values ?? null;
  const altitude = values("altitude");
  const heightM = altitude ? median(altitude.filter((h) => h !== 0)) : Number.NaN;
  const expected = standardAtmosphere(heightM).pressurePa / 100;
  const off = weather.pressure_hpa - expected;
  if (Math.abs(off) > WEATHER_HPA) {
    const seaLevel = Math.abs(weather.pressure_hpa - 1013.25) < WEATHER_HPA && heightM > 0;
    notes.push({
      code: "pressure_implausible",
      consequence: "warned",
      message: `The typed pressure of ${fixed(weather.pressure_hpa, 0)} hPa does not belong to the GPS altitude of ${fixed(heightM, 0)} m, where about ${fixed(expected, 0)} hPa stand. ${seaLevel ? "It looks like one reduced to sea level; type" : "Type"} the station pressure read at the car.`,
    });
  }
  const intake = values("intake_temperature");
  const coldest = intake ? quantile(intake, 0.05) : Number.NaN;
  if (coldest < weather.temp_c - COLDER_K) {
    notes.push({
      code: "temperature_implausible",
      consequence: "warned",
      message: `The typed ${fixed(weather.temp_c, 1)} °C lie above the coldest intake air of ${fixed(coldest, 1)} °C in the log. Check the thermometer and the intake sensor.`,
    });
  }
  return notes;
}
