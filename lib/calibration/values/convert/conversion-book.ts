import type { DescriptionModule } from "@/lib/calibration/a2l/types";
import { type Converter, converterOf, RAW_CONVERTER } from "@/lib/calibration/values/convert/converter";

/** The conversions of a module by name, made ready once each; keeps what should be told about those that were used. */
export class ConversionBook {
  private readonly ready = new Map<string, Converter>();
  private readonly uses = new Map<string, number>();

  constructor(private readonly module: DescriptionModule) {}

  /** The conversion of that name; null = NO_COMPU_METHOD. A name that nothing stands behind converts nothing. */
  named(name: string | null): Converter {
    if (name === null) return RAW_CONVERTER;
    let converter = this.ready.get(name);
    if (!converter) {
      const conversion = this.module.conversions.get(name);
      converter = converterOf(
        conversion ?? {
          kind: "unknown",
          reason: "the description does not hold it",
          name,
          text: "",
          unit: "",
          decimals: null,
        },
      );
      this.ready.set(name, converter);
    }
    if (converter.problem !== null) this.uses.set(name, (this.uses.get(name) ?? 0) + 1);
    return converter;
  }

  /** One sentence for each conversion that was used and converts nothing. */
  problems(): string[] {
    return [...this.uses]
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(
        ([name, uses]) =>
          `The conversion ${name} can't be used: ${this.ready.get(name)?.problem}. It was needed ${uses === 1 ? "once" : `${uses} times`}; only raw numbers are known there.`,
      );
  }
}
