import type { Route } from "next";
import Link from "next/link";
import { DateTime } from "@/components/ui/data/date-time";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { Card } from "@/components/ui/layout/card";
import type { RunView } from "@/lib/services/runs/get";

/** What the verdict was computed with, and where the run is used. */
export function RunBasis({ view }: { view: RunView }) {
  const { verdict, newestSheetVersion, comparisons, records, programme, roadDay, channelKey, acts } = view;
  const isOld = verdict !== null && verdict.sheetVersion < newestSheetVersion;
  return (
    <Card title="Computed with, used in" id="basis">
      <DescriptionList
        items={[
          {
            term: "Vehicle sheet",
            description: verdict ? (
              <>
                <Link href={`/programmes/${programme.id}/vehicle-sheet`} className="link">
                  version {verdict.sheetVersion}
                </Link>
                {isOld && `; version ${newestSheetVersion} is newer and the run is judged again`}
              </>
            ) : (
              "not judged yet"
            ),
          },
          {
            term: "Analysis version",
            description: verdict ? (
              <>
                {verdict.analysisVersion}, <DateTime at={verdict.at} zone={roadDay.zone} precision="second" />
              </>
            ) : (
              "not judged yet"
            ),
          },
          {
            term: "Input",
            description: verdict ? <Fingerprint value={verdict.inputSha256} /> : "not judged yet",
          },
          {
            term: "Channel key",
            description: (
              <span className="flex flex-wrap gap-x-4">
                <span>
                  {channelKey
                    ? `${channelKey.name} v${channelKey.version}`
                    : "none: read by what the log says alone"}
                </span>
                {acts.chooseColumns === null && (
                  <Link href={`/runs/${view.run.id}/channel-key` as Route} className="link">
                    Choose columns
                  </Link>
                )}
              </span>
            ),
          },
          {
            term: "Losses",
            description:
              "of this run's own coast-down; comparisons pool the coast-downs of the road day and can differ a little",
          },
          {
            term: "Comparisons of its revision",
            description:
              comparisons.length === 0 ? (
                "none yet"
              ) : (
                <span className="flex flex-wrap gap-x-4">
                  {comparisons.map(({ id, a, b }) => (
                    <Link key={id} href={`/comparisons/${id}`} className="link">
                      {a === b ? `null test of R${a}` : `R${a} against R${b}`}
                    </Link>
                  ))}
                </span>
              ),
          },
          {
            term: "Evidence of records",
            description:
              records.length === 0 ? (
                "none"
              ) : (
                <span className="flex flex-wrap gap-x-4">
                  {records.map(({ recordNumber, decisionId }) => (
                    <Link key={decisionId} href={`/records/${decisionId}`} className="link">
                      Record {recordNumber}
                    </Link>
                  ))}
                </span>
              ),
          },
        ]}
      />
    </Card>
  );
}
