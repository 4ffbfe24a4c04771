/**
 * Words of column titles by what they mean, in the order English; German; French; Spanish; Italian; Dutch; Portuguese;
 * Swedish; Polish; Czech. Accents, capitals and small joining words don't matter; a word may mean two things at once
 * ("engine rpm"). Common practice, no source. A word with two meanings in these languages stays out.
 */
export const TITLE_WORDS: Readonly<Record<string, string>> = {
  speed:
    "speed, spd, velocity, vel, mps, kmh, kph, mph; Geschwindigkeit; vitesse; velocidad; velocità; snelheid; velocidade; hastighet, fart; prędkość, prędkości; rychlost, rychlosti",
  gps: "gps, gnss",
  "gps speed": "sog, speed over ground; GPS-Geschwindigkeit",
  vehicle:
    "vehicle, veh, car, road, dyno, cyc, cycle, ground; Fahrzeug; véhicule, voiture; vehículo, coche; veicolo, vettura; voertuig, wagen; veículo, carro; fordon, bil; pojazd, pojazdu; vozidlo, vozidla, auta",
  "vehicle speed":
    "vss, v veh, v vehicle; Fahrgeschwindigkeit, Fahrzeuggeschwindigkeit; ; ; ; rijsnelheid, voertuigsnelheid; ; fordonshastighet",
  wheel: "wheel, whl; Rad; roue; rueda; ruota; wiel; roda; hjul; koło, koła; kolo, kola",
  "wheel speed": "; Radgeschwindigkeit, Raddrehzahl; ; ; ; wielsnelheid; ; hjulhastighet",
  undriven:
    "undriven, non driven, not driven, free rolling; nicht angetrieben; non motrice, libre; no motriz; non motrice, folle; niet aangedreven; não motriz; ej drivande, odrivet; nienapędzane, nienapędzanego; nehnané, nehnaného, nepoháněné",
  driven:
    "driven; angetrieben; motrice; motriz; ; aangedreven; ; drivande; napędzane, napędzanego; hnané, hnaného, poháněné",
  "driven wheel":
    "drive wheel, drive wheels; Antriebsrad; roue motrice; rueda motriz; ruota motrice; ; roda motriz; drivhjul",
  front:
    "front; vorn, vorne; avant; delantera; anteriore; voor, voorwiel; dianteira; fram; przód, przednie, przedniego; přední, předního",
  rear: "rear, back; hinten; arrière; trasera; posteriore; achter, achterwiel; traseira; bak; tył, tylne, tylnego; zadní, zadního",
  engine:
    "engine, eng, crank, crankshaft; Motor, mot, Kurbelwelle; moteur; ; motore; ; ; motorns; silnik, silnika; motoru",
  rpm: "rpm, revs, rev; Drehzahl, Umdrehungen; régime, régime de rotation, tours minute; revoluciones, régimen; giri, regime; toerental, toeren; rotação, rotações; varvtal, varv; obroty, obrotów, prędkość obrotowa; otáčky, otáček",
  "engine rpm": "n mot, n motor, n eng, n engine; Motordrehzahl; ; ; ; motortoerental; ; motorvarvtal",
  accelerator:
    "accelerator; Fahrpedal, Gaspedal, Fahrpedalstellung, Gaspedalstellung, Fahrpedalwert; accélérateur; acelerador; acceleratore; gaspedaal; ; gaspedalen; ; akcelerátor, akcelerátoru, plynový",
  accel: "accel",
  gas: "gas; ; ; ; ; ; ; ; gaz, gazu; plyn, plynu",
  "accelerator pedal":
    "app; ; position accélérateur; posición acelerador; ; gaspedaalstand; posição acelerador; gaspedalläge; pedał przyspieszenia, pedału przyspieszenia",
  pedal: "pedal; ; pédale; ; pedale; pedaal; ; pedalen; pedał, pedału; pedál, pedálu",
  throttle:
    "throttle, tps; Drosselklappe, Drosselklappenstellung, Drosselklappenwinkel, Drossel; papillon, papillon des gaz, boîtier papillon; mariposa; farfalla, corpo farfallato; gasklep, gasklepstand, smoorklep; borboleta; trottel, spjäll, gasspjäll, trottelspjäll; przepustnica, przepustnicy; škrticí klapka, škrticí klapky, klapka, klapky",
  manifold:
    "manifold; Saugrohr; collecteur; colector; collettore; spruitstuk, inlaatspruitstuk; coletor; insugsrör, insug; kolektor, kolektora; sací potrubí, sacím potrubí, sání",
  boost:
    "boost, charge; ; suralimentation; sobrealimentación, soplado; sovralimentazione; ; ; laddning; doładowanie, doładowania; plnicí, plnění, přeplňování",
  turbo: "turbo; ; ; ; ; ; ; ; turbosprężarki; turba",
  "boost pressure": "; Ladedruck; ; ; ; laaddruk; ; laddtryck",
  pressure:
    "pressure, press; Druck; pression; presión; pressione; druk; pressão; tryck; ciśnienie, ciśnienia; tlak, tlaku",
  "manifold pressure": "map, manifold absolute, manifold abs; Saugrohrdruck; ; ; ; inlaatdruk; ; insugstryck",
  lambda: "lambda, wideband lambda; Lambdawert; ; ; ; lambdawaarde; ; lambdavärde",
  ignition:
    "ignition, ign; Zündung; allumage; encendido; accensione; ontsteking; ignição; tändning; zapłon; zapalování",
  "ignition advance":
    "ignition advance, ignition timing, ignition angle, ign adv, ign advance, ign timing, ign angle, spark adv, spark advance, timing adv, timing advance, ignition adv; Zündwinkel, Zündzeitpunkt, Vorzündung; avance à l'allumage, avance allumage; avance de encendido, avance del encendido; anticipo accensione, anticipo di accensione; ontstekingstijdstip, voorontsteking; avanço de ignição, avanço da ignição; tändläge, tändvinkel, tändförställning; wyprzedzenie zapłonu, kąt wyprzedzenia zapłonu; předstih zážehu, předstih zapalování, úhel předstihu",
  knock:
    "knock; Klopfen; cliquetis; detonación; detonazione; pingelen; detonação; knack; spalanie stukowe; klepání",
  "knock retard":
    "knock retard, knock correction, knock retardation, knock ret; Klopfregelung, Klopfrücknahme, Rücknahme Klopfen; retrait cliquetis, retrait d'avance cliquetis; retardo por detonación, retardo detonación, retraso por detonación; ritardo detonazione, ritardo per detonazione; klopregeling, pingelcorrectie; retardo por detonação, atraso por detonação; knackreglering; cofnięcie zapłonu, cofnięcie kąta zapłonu; korekce klepání, ustoupení předstihu klepání",
  temperature:
    "temperature, temp; Temperatur; température; temperatura; ; temperatuur; ; ; temperatury; teplota, teploty",
  intake:
    "intake, inlet; Ansaug; admission; admisión; aspirazione, aspirata; inlaat; admissão; ; dolotowe, dolotowego, dolot, dolotu; sací, nasávání, nasávaného",
  air: "air; Luft; ; aire; aria; lucht; ar; ; powietrze, powietrza; vzduch, vzduchu",
  "intake temperature":
    "iat; Ansauglufttemperatur, Ansaugtemperatur, Ladelufttemperatur; ; ; ; inlaatluchttemperatuur, laadluchttemperatuur, inlaattemperatuur; ; insugstemperatur, insugningstemperatur, laddlufttemperatur",
  coolant:
    "coolant, water; Kühlmittel, Kühlwasser, Wasser; liquide de refroidissement, eau, eau moteur; refrigerante, líquido refrigerante, agua; liquido refrigerante, liquido di raffreddamento, acqua; koelvloeistof, koelwater; água, arrefecimento, líquido de arrefecimento; kylvätska, kylvatten, vatten; płyn chłodzący, płynu chłodzącego, chłodziwo, chłodziwa, cieczy chłodzącej; chladicí kapalina, chladicí kapaliny, chladící kapaliny, vody",
  "coolant temperature":
    "ect, clt; Kühlmitteltemperatur, Kühlwassertemperatur, Wassertemperatur; ; ; ; koelvloeistoftemperatuur, koelwatertemperatuur; ; kylvätsketemperatur, kylvattentemperatur, vattentemperatur",
  exhaust:
    "exhaust; Abgas; échappement; escape; scarico, gas di scarico; uitlaat, uitlaatgas; ; avgas, avgaser; spalin, spaliny; výfuk, výfuku, výfukových plynů, spalin, výfukové plyny",
  "exhaust temperature": "egt; Abgastemperatur; ; ; ; uitlaatgastemperatuur; ; avgastemperatur",
  gear: "gear; Gang, Gangstufe; rapport, rapport engagé, rapport de boîte, vitesse engagée; marcha, marcha engranada; marcia, marcia inserita; ; marcha engatada; växel; bieg, biegu; převodový stupeň, zařazený stupeň, rychlostní stupeň",
  long: "long",
  longitudinal: "longitudinal; längs; longitudinale; ; ; langs; ; ; wzdłużne, wzdłużna; podélné",
  acceleration:
    "acceleration, acc; Beschleunigung; accélération; aceleración; accelerazione; ; aceleração; ; przyspieszenie; zrychlení",
  "longitudinal acceleration":
    "; Längsbeschleunigung; ; ; ; langsversnelling, langsacceleratie; ; längsacceleration",
  latitude:
    "latitude, lat; Breite, Breitengrad, geographische Breite; ; latitud; latitudine; breedtegraad; ; latitud; szerokość geograficzna; zeměpisná šířka",
  longitude:
    "longitude, lon, lng; Länge, Längengrad, geographische Länge; ; longitud; longitudine; lengtegraad; ; longitud; długość geograficzna; zeměpisná délka",
  altitude:
    "altitude, alt, elevation, height; Höhe; ; altitud; altitudine, quota; hoogte; ; höjd; wysokość; nadmořská výška, výška",
};

/** Words that say nothing about which quantity it is. */
export const PLAIN_WORDS =
  "value, actual, act, current, measured, sensor, signal, position, pos, angle, filtered, smoothed, obd, ecu, can, bank, selected, number, no, derived from positions, from, of, the, average, mean; Wert, ist, aktuell, aktueller, Stellung, Winkel, Sensor; réel, réelle, actuel, valeur, capteur, d, l, de, du, la, le, des, à, au, aux; real, actual, valor, posición, del, el, los, en, por; attuale, reale, valore, posizione, sensore, di, della, dell, dei, al; huidig, huidige, werkelijk, waarde, stand, positie, van, het, der; atual, posição, da, do, das, dos; verklig, aktuellt, värde, läge, givare; rzeczywista, rzeczywiste, aktualna, wartość, położenie, pozycja, czujnik, w, na; skutečná, skutečné, aktuální, hodnota, poloha, snímač, v, z; left, right; links, rechts; gauche, droite; izquierda, derecha; sinistra, destra; ; esquerda, direita; vänster, höger; lewe, prawe, lewego, prawego; levé, pravé, levého, pravého";

/** Words that make a title name another thing than the measured quantity: what is asked for, an error, a bound, another pedal. */
export const OTHER_WORDS =
  "target, desired, setpoint, set point, request, requested, commanded, cmd, demand, demanded, error, deviation, status, valid, flag, accuracy, heading, sats, ratio, limit, limiter, max, maximum, min, minimum, raw, steering, brake, clutch, turbine, wind, fan, idle, correction factor; Soll, Sollwert, Vorgabe, Ziel, Fehler, Abweichung, Grenze, Begrenzung, Lenkrad, Bremse, Bremspedal, Bremsdruck, Kupplung, Kupplungspedal, Leerlauf; consigne, cible, demandé, demandée, souhaité, souhaitée, erreur, écart, limite, frein, embrayage, volant, ralenti, vent; objetivo, deseado, deseada, consigna, solicitado, solicitada, desviación, límite, freno, embrague, ralentí, viento; obiettivo, richiesto, richiesta, desiderato, desiderata, errore, scostamento, frizione, sterzo, minimo, vento; gewenst, gewenste, doel, streefwaarde, gevraagd, fout, afwijking, grens, rem, rempedaal, koppeling, koppelingspedaal, stuur, stationair; alvo, desejado, desejada, pedido, erro, desvio, freio, travão, embreagem, volante; börvärde, mål, önskad, önskat, begärd, begärt, fel, avvikelse, gräns, broms, bromspedal, koppling, kopplingspedal, ratt, tomgång; zadana, zadane, zadany, żądana, żądane, żądany, docelowa, docelowe, błąd, odchyłka, uchyb, granica, hamulec, hamulca, sprzęgło, sprzęgła, kierownica; požadovaná, požadované, požadovaný, žádaná, žádané, žádaný, cílová, cílové, chyba, odchylka, mez, brzda, brzdy, brzdový, spojka, spojky, volantu, volnoběh";

/** What a pressure title says about its zero. */
export const PRESSURE_WORDS = {
  gauge:
    "gauge, rel, relative; relativ, Überdruck; surpression; sobrepresión, relativa; sovrappressione, relativo; overdruk, relatief; ; övertryck; nadciśnienie, względne; přetlak, relativní",
  absolute:
    "abs, absolute, map; absolut, Absolutdruck; absolue, absolu; absoluta, absoluto; assoluta, assoluto; absoluut, absolute; ; ; bezwzględne, absolutne; absolutní",
} as const;

/** Titles of times. */
export const TIME_WORDS =
  "time, timestamp, time stamp, date time, datetime, elapsed, clock, sec, secs, seconds, cyc sec, cyc secs, cycle sec, cycle secs; Zeit, Uhrzeit, Zeitstempel, Zeitpunkt, Messzeit, Sekunden, Datum Uhrzeit; temps, heure, horodatage, date heure; tiempo, hora, fecha hora, marca de tiempo; tempo, ora, data ora, orario; tijd, tijdstip, tijdstempel, datum tijd; data hora; tid, klockslag, tidsstämpel, datum tid; czas, godzina, data czas, znacznik czasu; čas, časová značka, datum čas";
/** Words beside a time that leave it a time. */
export const TIME_SIDE_WORDS =
  "device, gps, gnss, utc, local, log, elapsed, relative, session, absolute, s, ms, us, ns, min, h, since start, from start; Messung; écoulé, relatif; transcurrido, relativo; trascorso; verstreken; decorrido; förfluten; względny; relativní";

/** Titles with two meanings: nobody but the tester can say which. */
export const AMBIGUOUS_TITLES: Readonly<Record<string, string>> = {
  "a gear or an acceleration": "versnelling",
  "a speed or a time": "tempo",
  "a pedal or an acceleration": "accel, accel position",
  "a gas or a pedal": "gas, gaz, plyn",
  "ignition advance or an early request": "avance, avanço, anticipo, předstih",
  "coolant or cylinder head temperature":
    "engine temperature, engine temp, Motortemperatur; température moteur; temperatura motor, temperatura del motor; temperatura motore; motortemperatuur; temperatura do motor; temperatura silnika; teplota motoru",
  "ambient or intake air temperature":
    "air temperature, air temp, Lufttemperatur; température air, température d'air; temperatura aire, temperatura del aire; temperatura aria; luchttemperatuur; temperatura do ar; temperatura powietrza; teplota vzduchu",
};
