import { TouchedMarks } from "@/components/features/decisions/touched-marks";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { counted, numberText } from "@/components/ui/data/number-text";

export interface RecordCalibrationProps {
  calibration: {
    resultSha256: string;
    coverageSha256: string | null;
    readBy: "both" | "a" | "b" | "none";
    changedBytes: number;
    changedCharacteristics: number;
    uncoveredBytes: number;
    touched: React.ComponentProps<typeof TouchedMarks>["touched"];
    approval: { document: string; issuer: string } | null;
    secondLead: { name: string; at: string; reason: string } | null;
  };
}

/** Bytes without a description may belong to anything. */
function noneTouched({
  readBy,
  changedBytes,
  uncoveredBytes,
}: RecordCalibrationProps["calibration"]): string {
  return (readBy === "none" && changedBytes > 0) || uncoveredBytes > 0
    ? "nothing described is touched; what no description covers can't be told"
    : "nothing touched";
}

/** What changed in the values when it was decided, what of it is marked, and by whose word it was released for the road. */
export function RecordCalibration({ calibration }: RecordCalibrationProps) {
  const { touched, approval, secondLead, coverageSha256, readBy } = calibration;
  const items = [
    {
      term: "Changed",
      description:
        readBy === "none"
          ? `${counted(calibration.changedBytes, "byte")}; no description said what they are`
          : `${counted(calibration.changedCharacteristics, "characteristic")}, ${counted(calibration.changedBytes, "byte")}, of which ${numberText(calibration.uncoveredBytes)} are described by none`,
    },
    { term: "Change set", description: <Fingerprint value={calibration.resultSha256} full /> },
    {
      term: "Coverage",
      description: coverageSha256 ? <Fingerprint value={coverageSha256} full /> : "none was there",
    },
    {
      term: "Marked as emission- or safety-relevant",
      description: touched.length > 0 ? <TouchedMarks touched={touched} /> : noneTouched(calibration),
    },
    ...(approval
      ? [{ term: "Approval document", description: `${approval.document}, issued by ${approval.issuer}` }]
      : []),
    ...(secondLead
      ? [
          {
            term: "Second lead",
            description: `${secondLead.name} agreed on ${secondLead.at.slice(0, 16).replace("T", " ")} UTC: ${secondLead.reason}`,
          },
        ]
      : []),
  ];
  return <DescriptionList items={items} />;
}
