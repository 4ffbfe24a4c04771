"use client";

import { Check } from "lucide-react";
import { type FormEvent, useState } from "react";
import { LINK_WORDS } from "@/components/features/programmes/calibration/setting-tables";
import {
  SaveVersion,
  useSaveVersion,
  type VersionAnswer,
} from "@/components/features/programmes/save-version";
import { Button } from "@/components/ui/action/button";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import { channelWords } from "@/lib/logs/channels/channel-words";
import { KNOWN_CHANNELS } from "@/lib/logs/types";
import type { ShownQuantity } from "@/lib/services/change-sets/schema";

export interface LinksFormProps {
  programmeId: string;
  version: number;
  /** Chosen by people so far. */
  links: readonly AxisLink[];
  /** What moves along axes of the revision that is looked at. */
  quantities: readonly ShownQuantity[];
  blockedBecause: string | null;
  action: (input: {
    programmeId: string;
    basedOnVersion: number;
    links: AxisLink[];
  }) => Promise<VersionAnswer>;
}

const TITLE = "a column's title";
const CHANNELS: readonly string[] = KNOWN_CHANNELS.filter((channel) => channel !== "time");

/** One row a quantity: what it is linked to by itself, what may be meant, and the choice by hand. */
export function LinksForm({
  programmeId,
  version,
  links,
  quantities,
  blockedBecause,
  action,
}: LinksFormProps) {
  const [chosen, setChosen] = useState<readonly AxisLink[]>(links);
  const { save, ...state } = useSaveVersion(version);
  const sendAll = (all: readonly AxisLink[]) =>
    save(() =>
      action({
        programmeId,
        basedOnVersion: version,
        links: all.filter(({ channel }) => channel.trim() !== ""),
      }),
    );
  const replaced = (quantity: string, link: AxisLink | null) => [
    ...chosen.filter((one) => one.quantity !== quantity),
    ...(link ? [link] : []),
  ];
  const accept = (link: AxisLink) => {
    const all = replaced(link.quantity, link);
    setChosen(all);
    void sendAll(all);
  };
  const send = (event: FormEvent) => {
    event.preventDefault();
    void sendAll(chosen);
  };
  const elsewhere = links
    .filter((link) => !quantities.some(({ quantity }) => quantity === link.quantity))
    .map(({ quantity }): ShownQuantity => ({ quantity, text: "", unit: "", link: null, suggestions: [] }));
  return (
    <form onSubmit={send} noValidate className="flex flex-col gap-6">
      {quantities.length + elsewhere.length === 0 && (
        <p className="text-15">No axis moved by a quantity is touched by this revision.</p>
      )}
      <ul>
        {[...quantities, ...elsewhere].map((quantity) => (
          <LinkRow
            key={quantity.quantity}
            quantity={quantity}
            chosen={chosen.find((link) => link.quantity === quantity.quantity) ?? null}
            isBlocked={blockedBecause !== null || state.isSaving}
            onChoose={(link) => setChosen(replaced(quantity.quantity, link))}
            onAccept={accept}
          />
        ))}
      </ul>
      <SaveVersion version={version} blockedBecause={blockedBecause} {...state} />
    </form>
  );
}

interface LinkRowProps {
  quantity: ShownQuantity;
  chosen: AxisLink | null;
  isBlocked: boolean;
  onChoose: (link: AxisLink | null) => void;
  onAccept: (link: AxisLink) => void;
}

function LinkRow({
  quantity: { quantity, text, unit, link, suggestions },
  chosen,
  isBlocked,
  onChoose,
  onAccept,
}: LinkRowProps) {
  const byItself = link && link.by !== "hand" && !chosen ? link : null;
  const isTitle = chosen !== null && !CHANNELS.includes(chosen.channel);
  const choose = (channel: string) => onChoose(channel === "" ? null : { quantity, channel, by: "hand" });
  const offered = suggestions.filter(
    ({ channel }) => channel !== chosen?.channel && channel !== byItself?.channel,
  );
  return (
    <li
      aria-label={quantity}
      className="grid gap-x-4 gap-y-2 border-line border-t py-3 first:border-t-0 md:grid-cols-[minmax(0,1fr)_18rem] md:items-start"
    >
      <div className="min-w-0">
        <p className="break-words text-15">
          <span className="font-medium">{quantity}</span>
          {unit && <span className="text-ink2">, {unit}</span>}
        </p>
        {text && <p className="text-13 text-ink2">{text}</p>}
        <p className="text-13 text-ink2">
          {chosen
            ? `Linked to ${channelWords(chosen.channel)}, ${LINK_WORDS[chosen.by]}.`
            : byItself
              ? `Linked by itself to ${channelWords(byItself.channel)}, ${LINK_WORDS[byItself.by]}.`
              : "Not linked: where runs went on this axis can't be told."}
        </p>
        {offered.length > 0 && (
          <div className="mt-2 flex flex-wrap gap-2">
            {offered.map((offer) => (
              <Button
                key={`${offer.by}${offer.channel}`}
                icon={<Check />}
                disabled={isBlocked}
                onClick={() => onAccept(offer)}
              >
                Use {channelWords(offer.channel)}
              </Button>
            ))}
          </div>
        )}
      </div>
      <div className="flex flex-col gap-2">
        <Select
          label="Channel"
          aria-label={`Channel of ${quantity}`}
          emptyLabel={byItself ? "as linked by itself" : "not linked"}
          value={chosen === null ? "" : isTitle ? TITLE : chosen.channel}
          onChange={({ target }) =>
            target.value === TITLE ? onChoose({ quantity, channel: " ", by: "hand" }) : choose(target.value)
          }
          options={[
            ...CHANNELS.map((value) => ({ value, label: channelWords(value) })),
            { value: TITLE, label: "a column of the log, by its title" },
          ]}
        />
        {isTitle && (
          <TextInput
            label="Title of the column"
            aria-label={`Title of the column for ${quantity}`}
            value={chosen.channel === " " ? "" : chosen.channel}
            onChange={({ target }) =>
              onChoose({ quantity, channel: target.value === "" ? " " : target.value, by: "hand" })
            }
          />
        )}
      </div>
    </li>
  );
}
