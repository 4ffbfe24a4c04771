import Link from "next/link";
import { DateTime } from "@/components/ui/data/date-time";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { Quantity } from "@/components/ui/data/quantity";

export interface RunFactsProps {
  run: {
    kind: string;
    leg: string;
    driveOrder: number;
    gear: number | null;
    tempC: number;
    pressureHpa: number;
    humidityPct: number;
    note: string;
    logFileName: string;
    logSha256: string;
    logBytes: number;
    createdAt: Date;
  };
  revision: { id: string; number: number; title: string };
  roadDay: { id: string; day: string; stripName: string; zone: string };
  testerName: string;
}

/** What was in the car, who drove it up, where, and which file says so. */
export function RunFacts({ run, revision, roadDay, testerName }: RunFactsProps) {
  return (
    <DescriptionList
      layout="stacked"
      items={[
        {
          term: "In the car",
          description: (
            <Link href={`/revisions/${revision.id}`} className="link">
              R{revision.number} {revision.title}
            </Link>
          ),
        },
        {
          term: "Road day",
          description: (
            <Link href={`/road-days/${roadDay.id}`} className="link">
              {roadDay.day}, {roadDay.stripName}
            </Link>
          ),
        },
        { term: "Leg and place", description: `${run.leg}, place ${run.driveOrder}` },
        { term: "Driven as", description: run.gear === null ? run.kind : `${run.kind}, gear ${run.gear}` },
        {
          term: "Weather used",
          description: (
            <>
              <Quantity value={run.tempC} unit="°C" decimals={1} />,{" "}
              <Quantity value={run.pressureHpa} unit="hPa" decimals={1} />,{" "}
              <Quantity value={run.humidityPct} unit="%" decimals={0} />
            </>
          ),
        },
        {
          term: "Attached",
          description: (
            <>
              by {testerName}, <DateTime at={run.createdAt} zone={roadDay.zone} />
            </>
          ),
        },
        {
          term: "Log",
          description: (
            <span className="break-all">
              {run.logFileName}, <Quantity value={run.logBytes / 1e6} unit="MB" decimals={2} />
            </span>
          ),
        },
        { term: "Fingerprint", description: <Fingerprint value={run.logSha256} /> },
        { term: "Proof of what was in the car", description: "typed only" },
        { term: "Note", description: run.note || "none" },
      ]}
    />
  );
}
