import { nameSome } from "@/lib/format/name-some";

/** Marked functions and characteristics that a change touches, with what of them changed. */
export function TouchedMarks({
  touched,
}: {
  touched: readonly { name: string; relevance: "emission" | "safety"; characteristics: readonly string[] }[];
}) {
  return (
    <ul className="list-disc pl-5 text-15">
      {touched.map(({ name, relevance, characteristics }) => (
        <li key={`${name} ${relevance}`} className="break-words">
          <span className="font-mono">{name}</span>, {relevance}-relevant
          {characteristics.length === 1 && characteristics[0] === name
            ? ""
            : `: ${nameSome(characteristics, 5)}`}
        </li>
      ))}
    </ul>
  );
}
