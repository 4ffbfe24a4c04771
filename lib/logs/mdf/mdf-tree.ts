import { FileRefusedError } from "@/lib/errors";
import {
  demandData,
  type MdfFile,
  readId,
  readListed,
  readText,
  readU64,
  refuseDamaged,
} from "@/lib/logs/mdf/mdf-blocks";

/** Where a channel lies in its record and what its bits mean (MDF 4 names: CN block). */
export interface MdfChannel {
  name: string;
  unit: string | null;
  /** 0 value, 1 variable length, 2 master, 3 virtual master, 4 sync, 5 maximum length, 6 virtual. */
  type: number;
  /** 1 = time. */
  sync: number;
  dataType: number;
  bitOffset: number;
  byteOffset: number;
  bitCount: number;
  flags: number;
  invalidationBit: number;
  conversionAt: number;
  /** Signal data of a variable-length channel. */
  dataLink: number;
  isArray: boolean;
}

/** Records of one kind: their size and channels (CG block). */
export interface MdfChannelGroup {
  at: number;
  name: string | null;
  recordId: number;
  cycles: number;
  flags: number;
  dataBytes: number;
  invalidationBytes: number;
  channels: MdfChannel[];
}

/** Groups whose records share one stream of data (DG block). */
export interface MdfDataGroup {
  /** Bytes of the record id before each record; 0 = sorted. */
  idBytes: number;
  dataLink: number;
  groups: MdfChannelGroup[];
}

export interface MdfTree {
  /** Start of the recording, ms since 1970; by a local clock where `startIsLocal`. */
  startMs: number;
  startIsLocal: boolean;
  dataGroups: MdfDataGroup[];
}

const MAX_CHANNELS = 2000;
const MAX_TITLE_LENGTH = 200;
const MAX_DEPTH = 8;

function refuseMany(): never {
  throw new FileRefusedError(
    "too_many_columns",
    `The log has more than ${MAX_CHANNELS} channels; at most ${MAX_CHANNELS} are read. Export fewer channels.`,
  );
}

/** Reads a list of channels; members of a structure carry its name before their own. */
function readChannels(file: MdfFile, first: number, prefix: string, depth: number, into: MdfChannel[]): void {
  for (let at = first; at !== 0; ) {
    if (into.length >= MAX_CHANNELS) refuseMany();
    const block = readListed(file, at, ["CN"]);
    demandData(block, 24);
    const { view } = file;
    const [next = 0, composition = 0, name, , conversion = 0, data = 0, unit] = block.links;
    const d = block.dataAt;
    const inner = composition === 0 ? "" : readId(file, composition);
    const channel: MdfChannel = {
      name: `${prefix}${readText(file, name) ?? `channel at byte ${at}`}`.slice(0, MAX_TITLE_LENGTH),
      unit: readText(file, unit),
      type: view.getUint8(d),
      sync: view.getUint8(d + 1),
      dataType: view.getUint8(d + 2),
      bitOffset: view.getUint8(d + 3),
      byteOffset: view.getUint32(d + 4, true),
      bitCount: view.getUint32(d + 8, true),
      flags: view.getUint32(d + 12, true),
      invalidationBit: view.getUint32(d + 16, true),
      conversionAt: conversion,
      dataLink: data,
      isArray: inner === "##CA",
    };
    into.push(channel);
    if (inner === "##CN") {
      if (depth >= MAX_DEPTH)
        refuseDamaged(`The structure "${channel.name}" is nested more than ${MAX_DEPTH} deep`);
      readChannels(file, composition, `${channel.name}.`, depth + 1, into);
    }
    at = next;
  }
}

function readGroups(file: MdfFile, first: number, counter: { channels: number }): MdfChannelGroup[] {
  const groups: MdfChannelGroup[] = [];
  for (let at = first; at !== 0; ) {
    const block = readListed(file, at, ["CG"]);
    demandData(block, 32);
    const { view } = file;
    const [next = 0, channelAt = 0, name] = block.links;
    const d = block.dataAt;
    const channels: MdfChannel[] = [];
    readChannels(file, channelAt, "", 0, channels);
    counter.channels += channels.length;
    if (counter.channels > MAX_CHANNELS) refuseMany();
    groups.push({
      at,
      name: readText(file, name),
      recordId: readU64(view, d),
      cycles: readU64(view, d + 8),
      flags: view.getUint16(d + 16, true),
      dataBytes: view.getUint32(d + 24, true),
      invalidationBytes: view.getUint32(d + 28, true),
      channels,
    });
    at = next;
  }
  return groups;
}

/** Reads the structure of an MDF 4 file: data groups, channel groups, channels. Throws FileRefusedError. */
export function readTree(file: MdfFile): MdfTree {
  const head = readListed(file, 64, ["HD"]);
  demandData(head, 24);
  const dataGroups: MdfDataGroup[] = [];
  const counter = { channels: 0 };
  for (let at = head.links[0] ?? 0; at !== 0; ) {
    const block = readListed(file, at, ["DG"]);
    demandData(block, 1);
    const [next = 0, groupAt = 0, dataLink = 0] = block.links;
    const idBytes = file.view.getUint8(block.dataAt);
    if (![0, 1, 2, 4, 8].includes(idBytes))
      refuseDamaged(`The DG block at byte ${at} states record ids of ${idBytes} bytes`);
    dataGroups.push({ idBytes, dataLink, groups: readGroups(file, groupAt, counter) });
    at = next;
  }
  return {
    startMs: readU64(file.view, head.dataAt) / 1e6,
    startIsLocal: (file.view.getUint8(head.dataAt + 12) & 1) !== 0,
    dataGroups,
  };
}
