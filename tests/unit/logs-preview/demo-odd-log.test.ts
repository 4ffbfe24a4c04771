import { expect, test } from "vitest";
import { EFFECTS } from "@/db/seed/demo-effects";
import { driveRoadDay } from "@/db/seed/demo-logs";
import { asOlderBox, OLDER_BOX_KEY } from "@/db/seed/demo-odd-log";
import { FileRefusedError } from "@/lib/errors";
import { previewLog } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { readLog } from "@/lib/logs/read-log";

test("the demo's older recorder is refused by itself and read to the same values with its key", {
  timeout: 60_000,
}, () => {
  const effects = { effectA: EFFECTS.asFound, effectB: EFFECTS.asFound };
  const [run] = driveRoadDay({ twinsPerSide: 1, ...effects, tempC: 16, seed: 3 });
  const csv = run?.csv ?? Buffer.alloc(0);
  const odd = asOlderBox(csv);
  expect(() => readLog(odd)).toThrow(FileRefusedError);
  const usual = readLog(csv);
  const read = readLog(odd, { key: OLDER_BOX_KEY });
  expect(read.timeS).toEqual(usual.timeS);
  expect(read.channels.map(({ channel, values }) => [channel, values])).toEqual(
    usual.channels.map(({ channel, values }) => [channel, values]),
  );
  const words = previewWords(previewLog({ bytes: odd, complete: true }, { key: OLDER_BOX_KEY }));
  expect(words.leftOut).toEqual([]);
  expect(words.inDoubt).toEqual([]);
});
