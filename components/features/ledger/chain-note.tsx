import { StateMark } from "@/components/ui/status/state-mark";

export type ChainState =
  | { state: "holds"; fromSeq: number; toSeq: number; reachesHead: boolean }
  | { state: "broken"; atSeq: number }
  | { state: "empty" };

/** What the check of the shown stretch found, in one line. */
export function ChainNote({ chain }: { chain: ChainState }) {
  if (chain.state === "empty") return null;
  if (chain.state === "broken") {
    return (
      <div role="alert" className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <StateMark state="not_met">The chain is broken at entry {chain.atSeq}</StateMark>
        <p className="max-w-prose text-15">
          What stands here is not what was written. Stop, keep a copy of the database and its backups, and
          tell every lead and admin.
        </p>
      </div>
    );
  }
  return (
    <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
      <StateMark state="met">
        The chain holds from entry {chain.fromSeq} to {chain.toSeq}
      </StateMark>
      <p className="text-13 text-ink2">
        {chain.reachesHead && "The last is the newest there is. "}Each digest covers the entry before it; all
        were computed again just now.
      </p>
    </div>
  );
}
