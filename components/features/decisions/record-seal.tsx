import type { RecordKind } from "@/components/features/decisions/record-words";
import { DateTime } from "@/components/ui/data/date-time";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";

export interface RecordSealProps {
  record: {
    decision: {
      kind: RecordKind;
      deciderName: string;
      decidedAt: Date;
      meaning: string;
      reason: string;
      selfReleased: boolean;
      reauthMethod: string;
      recordSha256: string;
      previousRecordSha256: string | null;
    };
    authorName: string;
    submitterName: string | null;
    waivers: readonly unknown[];
    holds: boolean;
  };
}

/** Who signed what, when and with which meaning, under the digest that covers all of it. */
export function RecordSeal({ record }: RecordSealProps) {
  const { decision, authorName, submitterName, waivers, holds } = record;
  return (
    <Card title="Signature" className="crop-marks">
      <p className="max-w-prose text-17">
        <span className="font-semibold">{decision.deciderName}</span>, lead: {decision.meaning}.
      </p>
      <p className="mt-1 max-w-prose text-15">Reason: {decision.reason}</p>
      <div className="mt-3 flex flex-wrap gap-2">
        {decision.selfReleased && <Tag tone="strong">self-released</Tag>}
        {waivers.length > 0 && (
          <Tag tone="strong">{waivers.length === 1 ? "1 gate waived" : `${waivers.length} gates waived`}</Tag>
        )}
      </div>
      {decision.selfReleased && (
        <p className="mt-2 text-13 text-ink2">
          Who made the revision or asked for the decision also signed it: no other lead was active then.
        </p>
      )}
      <DescriptionList
        layout="stacked"
        className="mt-4 border-line border-t pt-4"
        items={[
          {
            term: "Signed",
            description: <DateTime at={decision.decidedAt} zone="UTC" precision="second" />,
          },
          { term: "Identity confirmed by", description: decision.reauthMethod },
          { term: "Made by", description: authorName },
          { term: "Asked by", description: submitterName ?? "nobody" },
          {
            term: "Fingerprint of this record",
            description: <Fingerprint value={decision.recordSha256} full />,
          },
          {
            term: "Of the record before",
            description: decision.previousRecordSha256 ? (
              <Fingerprint value={decision.previousRecordSha256} full />
            ) : (
              "this is the first"
            ),
          },
        ]}
      />
      {holds ? (
        <p className="mt-3 text-13 text-ink2">
          Checked now: the fingerprint computed anew from what is stored is the one that was signed.
        </p>
      ) : (
        <Notice tone="problem" title="This record does not hold" className="mt-3">
          What is stored no longer has the fingerprint that was signed. Do not rely on it; tell whoever runs
          this installation.
        </Notice>
      )}
    </Card>
  );
}
