import { addressText } from "@/components/ui/data/address-text";
import { DescriptionList } from "@/components/ui/data/description-list";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { counted } from "@/components/ui/data/number-text";
import { Notice } from "@/components/ui/status/notice";
import type { ImageSummary } from "@/lib/calibration/image/image-summary";

const CONTAINER_WORDS: Record<string, string> = {
  "intel-hex": "Intel HEX",
  "s-record": "Motorola S-record",
  binary: "raw binary",
};

export interface ImageUnderstoodProps {
  fileName: string;
  sizeBytes: number;
  sha256: string;
  summary: ImageSummary;
}

/** What the reader made of an image: container, segments, fingerprint of the file and identity of the content. */
export function ImageUnderstood({ fileName, sizeBytes, sha256, summary }: ImageUnderstoodProps) {
  const content = summary.segments.reduce((sum, segment) => sum + segment.length, 0);
  return (
    <div className="flex flex-col gap-4">
      <DescriptionList
        items={[
          { term: "File", description: <span className="break-all">{fileName}</span> },
          {
            term: "Container",
            description: `${CONTAINER_WORDS[summary.container] ?? summary.container}, ${counted(sizeBytes, "byte")}`,
          },
          {
            term: "Content",
            description: `${counted(content, "byte")} in ${counted(summary.segments.length, "segment")}`,
          },
          {
            term: "Segments",
            description: (
              <ul className="tabular text-13">
                {summary.segments.slice(0, 8).map((segment) => (
                  <li key={segment.address}>
                    {addressText(segment.address)} to {addressText(segment.address + segment.length - 1)}
                  </li>
                ))}
                {summary.segments.length > 8 && <li>and {summary.segments.length - 8} more</li>}
              </ul>
            ),
          },
          { term: "Fingerprint (SHA-256 of the file)", description: <Fingerprint value={sha256} /> },
          {
            term: "Identity (of the content, whatever the container)",
            description: <Fingerprint value={summary.identity} />,
          },
        ]}
      />
      {summary.problems.map((problem) => (
        <Notice key={problem} tone="caution">
          {problem}
        </Notice>
      ))}
    </div>
  );
}
