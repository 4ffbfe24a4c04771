import type { CdfValue } from "@/lib/calibration/cdf/types";

interface Group {
  members: number;
  /** Nesting of what it holds: 0 = values; null = nothing yet. */
  holds: number | null;
}

/** Gathers the values of one SW-VALUES-PHYS and the shape in which groups (VG) nest them. */
export class ValueGroups {
  readonly values: CdfValue[] = [];
  private readonly open: Group[] = [{ members: 0, holds: null }];
  /** Members of a group by nesting, the innermost first. */
  private readonly sizes: number[] = [];
  /** Groups of one nesting have other numbers of members, or values stand beside groups. */
  isRagged = false;

  add(value: CdfValue): void {
    this.values.push(value);
    this.count(0);
  }

  openGroup(): void {
    this.open.push({ members: 0, holds: null });
  }

  closeGroup(): void {
    const group = this.open.pop();
    if (!group) return;
    const nesting = group.holds ?? 0;
    this.sizes[nesting] ??= group.members;
    if (this.sizes[nesting] !== group.members) this.isRagged = true;
    this.count(nesting + 1);
  }

  /** Cells by axis, the innermost first; [n] for values without groups or of an uneven shape. */
  get dims(): number[] {
    const [outer] = this.open;
    return this.isRagged || !outer.holds
      ? [this.values.length]
      : [...this.sizes.slice(0, outer.holds), outer.members];
  }

  private count(nesting: number): void {
    const group = this.open[this.open.length - 1];
    group.members++;
    group.holds ??= nesting;
    if (group.holds !== nesting) this.isRagged = true;
  }
}
