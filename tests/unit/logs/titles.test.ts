import { describe, expect, it } from "vitest";
import { isTimeTitle, readTitle } from "@/lib/logs/channels/channel-names";
import { readLog } from "@/lib/logs/read-log";
import { phrasesOf } from "@/lib/logs/titles/title-meaning";
import { TITLE_WORDS } from "@/lib/logs/titles/title-words";
import { parseUnit } from "@/lib/units/unit-text";

// Words of ten languages: common practice, no source.
const TITLES: Readonly<Record<string, readonly string[]>> = {
  gps_speed: [
    "GPS Speed",
    "Geschwindigkeit GPS",
    "Vitesse GPS",
    "Velocidad GPS",
    "Velocità GPS",
    "GPS snelheid",
    "Velocidade GPS",
    "GPS-hastighet",
    "Prędkość GPS",
    "Rychlost GPS",
    "VELOCITA' GPS",
  ],
  engine_speed: [
    "Engine RPM",
    "Motordrehzahl",
    "Régime moteur",
    "Regime moteur",
    "Régimen del motor",
    "Revoluciones motor",
    "Giri motore",
    "Toerental",
    "Rotação do motor",
    "Varvtal",
    "Obroty silnika",
    "Otáčky motoru",
    "Otáčky",
    "n",
  ],
  pedal: [
    "Accelerator pedal position",
    "Fahrpedal",
    "Pédale d'accélérateur",
    "Pédale",
    "Acelerador",
    "Pedale acceleratore",
    "Gaspedaal",
    "Pedal do acelerador",
    "Gaspedal",
    "Pedał gazu",
    "Pedál plynu",
  ],
  throttle: [
    "TPS",
    "Drosselklappe",
    "Position papillon",
    "Posición mariposa",
    "Farfalla",
    "Gasklep",
    "Borboleta",
    "Spjäll",
    "Przepustnica",
    "Škrticí klapka",
  ],
  manifold_pressure: [
    "Manifold pressure",
    "Saugrohrdruck",
    "Pression collecteur",
    "Pression d'admission",
    "Presión colector",
    "Pressione collettore",
    "Inlaatdruk",
    "Pressão do coletor",
    "Insugstryck",
    "Ciśnienie doładowania",
    "Plnicí tlak",
  ],
  lambda: ["Lambda", "λ", "Lambda 1", "Valeur lambda", "Hodnota lambda", "Lambda ist"],
  ignition_advance: [
    "Ignition advance",
    "Zündwinkel",
    "Avance à l'allumage",
    "Avance de encendido",
    "Anticipo accensione",
    "Ontstekingstijdstip",
    "Avanço da ignição",
    "Tändvinkel",
    "Kąt wyprzedzenia zapłonu",
    "Předstih zážehu",
  ],
  knock_retard: [
    "Knock retard",
    "Klopfregelung",
    "Retrait cliquetis",
    "Retardo por detonación",
    "Ritardo detonazione",
    "Cofnięcie zapłonu",
    "Korekce klepání",
  ],
  intake_temperature: [
    "Intake air temp",
    "Ansauglufttemperatur",
    "Température d'admission",
    "Temperatura de admisión",
    "Temperatura aria aspirata",
    "Inlaatluchttemperatuur",
    "Temperatura do ar de admissão",
    "Insugstemperatur",
    "Temperatura powietrza dolotowego",
    "Teplota nasávaného vzduchu",
  ],
  coolant_temperature: [
    "Coolant temp",
    "Kühlmitteltemperatur",
    "Kuehlmitteltemperatur",
    "Kuhlmitteltemperatur",
    "Température liquide de refroidissement",
    "Température eau",
    "Temperatura refrigerante",
    "Temperatura acqua",
    "Koelvloeistoftemperatuur",
    "Temperatura da água",
    "Kylvätsketemperatur",
    "Temperatura płynu chłodzącego",
    "Teplota chladicí kapaliny",
  ],
  exhaust_temperature: [
    "EGT1",
    "Abgastemperatur",
    "Température échappement",
    "Temperatura de escape",
    "Temperatura gas di scarico",
    "Uitlaatgastemperatuur",
    "Avgastemperatur",
    "Temperatura spalin",
    "Teplota výfukových plynů",
  ],
  gear: ["Gear", "Gang", "Rapport", "Rapport engagé", "Marcha", "Marcia", "Växel", "Bieg", "Zařazený stupeň"],
  longitudinal_acceleration: [
    "Accel long",
    "Längsbeschleunigung",
    "Accélération longitudinale",
    "Aceleración longitudinal",
    "Accelerazione longitudinale",
    "Langsversnelling",
    "Przyspieszenie wzdłużne",
    "Podélné zrychlení",
  ],
  altitude: ["Altitude", "Höhe", "Altitud", "Altitudine", "Hoogte", "Höjd", "Wysokość", "Nadmořská výška"],
  latitude: ["Latitude", "Breitengrad", "Latitud", "Latitudine", "Szerokość geograficzna", "Zeměpisná šířka"],
  longitude: ["gps_long", "Längengrad", "Longitud", "Lengtegraad", "Długość geograficzna"],
  wheel_speed_undriven: [
    "Wheel speed undriven",
    "Radgeschwindigkeit nicht angetrieben",
    "Vitesse roue non motrice",
    "Velocità ruota folle",
    "Velocidad rueda no motriz",
    "Hjulhastighet ej drivande",
    "Rychlost nehnaného kola",
  ],
};

describe("a title in one of ten languages names its channel", () => {
  it.each(Object.entries(TITLES))("%s", (channel, titles) => {
    for (const title of titles) {
      const { unknownWord, choice } = readTitle(title);
      expect([title, readTitle(title).channel, unknownWord, choice]).toEqual([title, channel, null, null]);
      expect(readTitle(title.toUpperCase()).channel, title).toBe(channel);
      expect(readTitle(title.normalize("NFD")).channel, title).toBe(channel);
    }
  });
  it("a speed that does not say where it comes from stays open", () => {
    for (const title of [
      "Geschwindigkeit",
      "Vitesse véhicule",
      "Velocità",
      "Snelheid",
      "Fart",
      "Prędkość",
      "Rychlost",
    ])
      expect([title, readTitle(title)]).toMatchObject([
        title,
        { channel: "wheel_speed_driven", speedKindOpen: true },
      ]);
  });
  it.each([
    ["Radgeschwindigkeit hinten links", "rear"],
    ["Vitesse roue avant gauche", "front"],
    ["Velocità ruota posteriore", "rear"],
    ["Wielsnelheid voor", "front"],
    ["Prędkość koła tylnego", "rear"],
    ["Rychlost předního kola", "front"],
    ["Wheel speed FL", "front"],
  ])("%s is a speed of the %s axle", (title, axle) => {
    expect(readTitle(title)).toMatchObject({ channel: null, axle });
  });
  it("times", () => {
    for (const title of [
      "Zeit [s]",
      "Temps",
      "Tiempo (s)",
      "Tempo",
      "Tijd",
      "Tid",
      "Czas",
      "Čas",
      "Hora",
      "time_utc",
      "cycSecs",
      "Uhrzeit",
      "Horodatage",
    ])
      expect([title, isTimeTitle(title)]).toEqual([title, true]);
    for (const title of ["Tempo iniezione", "Temps d'injection", "Timestep", "Tidal volume", "Čas vstřiku"])
      expect([title, isTimeTitle(title)]).toEqual([title, false]);
  });
});

describe("no wrong guess", () => {
  it.each([
    "Lambda target",
    "Lambda Soll",
    "Lambda cible",
    "Lambda objetivo",
    "Lambda obiettivo",
    "Lambda gewenst",
    "Lambda alvo",
    "Lambda börvärde",
    "Lambda zadana",
    "Požadovaná lambda",
    "Consigne régime moteur",
    "Erreur lambda",
    "Fehler Motordrehzahl",
    "Drehzahlgrenze",
    "Otáčky motoru žádané",
    "Frein pédale",
    "Bremspedal",
    "Pedal de freno",
    "Pedale frizione",
    "Pédale d'embrayage",
    "Rempedaal",
    "Kopplingspedal",
    "Pedał hamulca",
    "Pedál spojky",
    "Steering wheel angle",
    "Turbo speed",
    "Wind speed",
    "Oil temp",
    "Fuel pressure",
    "Boost target",
    "Ölduck",
  ])("%s is no known channel", (title) => {
    expect(readTitle(title)).toMatchObject({ channel: null, axle: null });
  });
  it("no phrase of the table has two meanings", () => {
    const seen = new Map<string, string>();
    for (const [meaning, entry] of Object.entries(TITLE_WORDS))
      for (const phrase of phrasesOf(entry)) {
        expect([phrase, seen.get(phrase) ?? meaning]).toEqual([phrase, meaning]);
        seen.set(phrase, meaning);
      }
    expect(seen.size).toBeGreaterThan(350);
  });
  const codes = (title: string, value = "50.5") =>
    readLog(
      Buffer.from(
        ["Time [s];x", ...Array.from({ length: 20 }, (_, i) => `${i / 10};${value}`)]
          .join("\n")
          .replace("x", title),
      ),
    );
  it.each([
    ["Versnelling", "title_ambiguous"],
    ["Temperatura motor [°C]", "title_ambiguous"],
    ["Engine speed cylinder", "title_in_doubt"],
    ["Knock", "unit_unknown"],
    ["Vitesse GPS", "unit_unknown"],
    ["Kühlmitteltemperatur", "unit_unknown"],
  ])("%s stays a free channel and is told: %s", (title, code) => {
    const { channels, problems } = codes(title);
    expect(channels[0].channel).toBeNull();
    expect(problems.map((problem) => problem.code)).toEqual([code]);
  });
});

describe("units as they are written in ten languages", () => {
  // One turn a minute is one turn a minute in every language; °F and inches of mercury by their definitions.
  it.each([
    ["tr/min", "rotation", 1],
    ["U/min", "rotation", 1],
    ["ot/min", "rotation", 1],
    ["obr/min", "rotation", 1],
    ["giri/min", "rotation", 1],
    ["varv/min", "rotation", 1],
    ["min⁻¹", "rotation", 1],
    ["Km/h", "speed", 1 / 3.6],
    ["kmh", "speed", 1 / 3.6],
    ["KM/H", "speed", 1 / 3.6],
    ["m/s²", "acceleration", 1],
    ["°C", "temperature", 1],
    ["degC", "temperature", 1],
    ["℃", "temperature", 1],
    ["hPa", "pressure", 0.1],
    ["mbar", "pressure", 0.1],
    ["bar rel.", "pressure", 100],
    ["bar (abs)", "pressure", 100],
    ["psi", "pressure", 6.894757],
  ] as const)("%s", (text, dimension, factor) => {
    expect(parseUnit(text)?.dimension).toBe(dimension);
    expect(parseUnit(text)?.factor).toBeCloseTo(factor, 5);
  });
  it("says absolute or gauge where the text does", () => {
    expect(
      ["bar abs", "bar rel", "mbar absolut", "bar(g)", "kPa"].map((text) => parseUnit(text)?.reference),
    ).toEqual(["absolute", "gauge", "absolute", "gauge", null]);
  });
  it("takes no unit for another", () => {
    for (const text of ["g/min", "l/min", "bar/s", "°C/s", "kmhh", "min/h"])
      expect(parseUnit(text), text).toBeNull();
  });
});
