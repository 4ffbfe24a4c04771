/** Common units by dimension; any other that the reader knows can be typed. */
const UNITS: Readonly<Record<string, readonly string[]>> = {
  speed: ["km/h", "mph", "m/s", "knots"],
  rotation: ["1/min", "1/s", "rad/s"],
  ratio: ["%"],
  pressure: ["kPa", "bar", "mbar", "hPa", "psi", "bar gauge", "bar abs"],
  temperature: ["°C", "°F", "K"],
  angle: ["°", "rad"],
  length: ["m", "ft", "km"],
  acceleration: ["m/s²", "g"],
  number: ["1"],
};

/** Id of the list that a unit box of this dimension offers. */
export const unitListId = (dimension: string): string => `units-${dimension}`;

/** The lists that unit boxes refer to; once a page. */
export function UnitLists() {
  return Object.entries(UNITS).map(([dimension, units]) => (
    <datalist key={dimension} id={unitListId(dimension)}>
      {units.map((unit) => (
        <option key={unit} value={unit} />
      ))}
    </datalist>
  ));
}
