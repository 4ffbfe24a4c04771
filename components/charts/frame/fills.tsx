export interface FillIds {
  hatch: string;
  dots: string;
  masked: string;
  noted: string;
}

/** Names of the four fills of one chart; `base` must be unique on the page (from `useId`). */
export function fillIds(base: string): FillIds {
  return { hatch: `${base}hatch`, dots: `${base}dots`, masked: `${base}masked`, noted: `${base}noted` };
}

/** Hatch: B higher. Dots: A higher. Thin grey hatch: left out of the computation; wide upright one: warned of. They tell apart without colour. */
export function FillDefs({ ids }: { ids: FillIds }) {
  return (
    <defs>
      <pattern
        id={ids.hatch}
        width="6"
        height="6"
        patternUnits="userSpaceOnUse"
        patternTransform="rotate(45)"
      >
        <line x1="1" x2="1" y1="0" y2="6" strokeWidth="2" className="stroke-side-b" />
      </pattern>
      <pattern id={ids.dots} width="5" height="5" patternUnits="userSpaceOnUse">
        <circle cx="1.5" cy="1.5" r="1.2" className="fill-side-a" />
        <circle cx="4" cy="4" r="1.2" className="fill-side-a" />
      </pattern>
      <pattern
        id={ids.masked}
        width="5"
        height="5"
        patternUnits="userSpaceOnUse"
        patternTransform="rotate(-45)"
      >
        <line x1="1" x2="1" y1="0" y2="5" strokeWidth="1" strokeOpacity="0.8" className="stroke-ink2" />
      </pattern>
      <pattern id={ids.noted} width="6" height="6" patternUnits="userSpaceOnUse">
        <line x1="3" x2="3" y1="0" y2="6" strokeWidth="1.5" className="stroke-ink2" />
      </pattern>
    </defs>
  );
}
