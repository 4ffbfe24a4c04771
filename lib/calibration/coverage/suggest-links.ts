import type { ChangeSet } from "@/lib/calibration/changes/types";
import { quantityOf } from "@/lib/calibration/coverage/axis-points";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import { CHANNEL_UNITS, readTitle } from "@/lib/logs/channels/channel-names";
import { channelWords } from "@/lib/logs/channels/channel-words";
import { type KnownChannel, ROAD_SPEEDS } from "@/lib/logs/types";
import { parseUnit } from "@/lib/units/unit-text";

/** What moves along an axis of something changed. */
export interface AxisQuantity {
  /** Input quantity of the description, or `NAME/x` for an axis without one. */
  quantity: string;
  /** What its name means in words; empty where that is not known. */
  text: string;
  unit: string;
}

/** A column of a log that an axis can be linked to. */
export interface LogColumn {
  title: string;
  /** The known channel that it is, or null. */
  channel: string | null;
}

/** Every quantity along an axis of what changed, each once, in the order of the change set. */
export function axisQuantities({ characteristics }: Pick<ChangeSet, "characteristics">): AxisQuantity[] {
  const found = new Map<string, AxisQuantity>();
  for (const { name, type, before, after } of characteristics) {
    if (type === "AXIS_PTS") continue;
    for (const [at, axis] of (after ?? before)?.axes.entries() ?? []) {
      const quantity = quantityOf(name, axis, at);
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
function fitsUnit(channel: KnownChannel, unit: string, needsUnit: boolean): boolean {
  const { dimension, withoutUnit } = CHANNEL_UNITS[channel];
  if (unit.trim() === "") return withoutUnit !== null && !needsUnit;
  return parseUnit(unit)?.dimension === dimension;
}

/** A link that may be right; `sure` where nothing about the name is left open. */
interface LikelyLink extends AxisLink {
  sure: boolean;
}

/** Channels that a name means, best first: any road speed tells where a table was used, so its kind is not asked. */
function channelsOf(title: ReturnType<typeof readTitle>, unit: string): KnownChannel[] {
  const { channel, speedKindOpen, pressureReference } = title;
  if (channel === null) return [];
  if (speedKindOpen) return [...ROAD_SPEEDS];
  const zero = parseUnit(unit)?.reference ?? pressureReference;
  return channel === "manifold_pressure" && zero === "gauge" ? ["manifold_pressure_gauge"] : [channel];
}

type Asked = Pick<AxisQuantity, "quantity" | "unit">;

function likelyLinks({ quantity, unit }: Asked, columns: readonly LogColumn[]): LikelyLink[] {
  const plain = (text: string) => text.trim().toLowerCase();
  const same = columns.find(({ title }) => plain(title) === plain(quantity));
  const byColumn: LikelyLink[] = same ? [{ quantity, channel: same.title, by: "column", sure: true }] : [];
  const title = readTitle(quantity);
  const channel = channelsOf(title, unit).find((one) => columns.some((column) => column.channel === one));
  if (channel === undefined || !fitsUnit(channel, unit, title.needsUnit)) return byColumn;
  const openZero = title.boostWord && title.pressureReference === null && !parseUnit(unit)?.reference;
  const sure = title.unknownWord === null && title.choice === null && !openZero;
  return [...byColumn, { quantity, channel, by: "title", sure }];
}

const plainLink = ({ quantity, channel, by }: LikelyLink): AxisLink => ({ quantity, channel, by });

/**
 * Links that a person may want, best first: a column of the same title (letter case and blanks around it don't matter), then the
 * channel that the quantity's name means, where a log has it and its unit converts.
 */
export function suggestedLinks(quantity: Asked, columns: readonly LogColumn[]): AxisLink[] {
  return likelyLinks(quantity, columns).map(plainLink);
}

/** The links in use: what people chose for the programme, else the first likely one that nothing is left open about. */
export function linksInUse(
  changeSet: Pick<ChangeSet, "characteristics">,
  { chosen, columns }: { chosen: readonly AxisLink[]; columns: readonly LogColumn[] },
): AxisLink[] {
  return axisQuantities(changeSet).flatMap((quantity) => {
    const byHand = chosen.find((link) => link.quantity === quantity.quantity);
    if (byHand) return [byHand];
    const likely = likelyLinks(quantity, columns).find(({ sure }) => sure);
    return likely ? [plainLink(likely)] : [];
  });
}
