import type { FoundColumn } from "@/db/schema/change-sets";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import { CHANNEL_UNITS, readTitle } from "@/lib/logs/channels/channel-names";
import { channelWords } from "@/lib/logs/channels/channel-words";
import type { KnownChannel } from "@/lib/logs/types";
import { parseUnit } from "@/lib/units/unit-text";

/** What moves along an axis of something changed. */
export interface AxisQuantity {
  /** Input quantity of the description, or `NAME/x` for an axis without one. */
  quantity: string;
  /** What its name means in words; empty where that is not known. */
  text: string;
  unit: string;
}

const AXIS_LETTERS = ["x", "y", "z", "4", "5"];

/** Every quantity along an axis of what changed, each once, in the order of the change set. */
export function axisQuantities({ characteristics }: Pick<ChangeSet, "characteristics">): AxisQuantity[] {
  const found = new Map<string, AxisQuantity>();
  for (const { name, type, before, after } of characteristics) {
    if (type === "AXIS_PTS") continue;
    for (const [at, axis] of (after ?? before)?.axes.entries() ?? []) {
      const quantity = axis.inputQuantity ?? `${name}/${AXIS_LETTERS[at] ?? at + 1}`;
      if (!found.has(quantity)) found.set(quantity, { quantity, text: wordsFor(quantity), unit: axis.unit });
    }
  }
  return [...found.values()];
}

function wordsFor(quantity: string): string {
  const { channel } = readTitle(quantity);
  return channel === null ? "" : channelWords(channel);
}

/** Whether a channel can stand for an axis in this unit; an axis without a unit can only be one that needs none. */
function fitsUnit(channel: KnownChannel, unit: string): boolean {
  const { dimension, withoutUnit } = CHANNEL_UNITS[channel];
  const parsed = parseUnit(unit);
  return parsed === null ? unit.trim() === "" && withoutUnit !== null : parsed.dimension === dimension;
}

/** A link that may be right; `sure` where nothing about the name is left open. */
interface LikelyLink extends AxisLink {
  sure: boolean;
}

function likelyLinks({ quantity, unit }: AxisQuantity, columns: readonly FoundColumn[]): LikelyLink[] {
  const same = columns.find(({ title }) => title.toLowerCase() === quantity.toLowerCase());
  const byColumn: LikelyLink[] = same ? [{ quantity, channel: same.title, by: "column", sure: true }] : [];
  const { channel, unknownWord, choice, speedKindOpen } = readTitle(quantity);
  if (channel === null || !fitsUnit(channel, unit)) return byColumn;
  if (!columns.some((column) => column.channel === channel)) return byColumn;
  const sure = unknownWord === null && choice === null && !speedKindOpen;
  return [...byColumn, { quantity, channel, by: "title", sure }];
}

const plain = ({ quantity, channel, by }: LikelyLink): AxisLink => ({ quantity, channel, by });

/** Links that a person may want, best first: a column of the same title, then what the quantity's name means in a unit that converts. */
export function suggestedLinks(quantity: AxisQuantity, columns: readonly FoundColumn[]): AxisLink[] {
  return likelyLinks(quantity, columns).map(plain);
}

/** The links in use: what people chose for the programme, else the first likely one that nothing is left open about. */
export function linksInUse(
  changeSet: Pick<ChangeSet, "characteristics">,
  { chosen, columns }: { chosen: readonly AxisLink[]; columns: readonly FoundColumn[] },
): AxisLink[] {
  return axisQuantities(changeSet).flatMap((quantity) => {
    const byHand = chosen.find((link) => link.quantity === quantity.quantity);
    if (byHand) return [byHand];
    const likely = likelyLinks(quantity, columns).find(({ sure }) => sure);
    return likely ? [plain(likely)] : [];
  });
}
