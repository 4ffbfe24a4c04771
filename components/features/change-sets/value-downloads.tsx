export interface ValueDownloadsProps {
  /** Null: there are no changed values. */
  changeSetId: string | null;
  /** Null: the image is not read by a description. */
  revision: { id: string; number: number } | null;
}

/** Physical values as files: of what changed, and of the whole revision. Nothing where there are none. */
export function ValueDownloads({ changeSetId, revision }: ValueDownloadsProps) {
  if (changeSetId === null && revision === null) return null;
  return (
    <p className="no-print flex flex-wrap gap-x-6 gap-y-1 border-line border-t pt-3 text-15">
      {changeSetId && (
        <Files
          words="Changed values"
          files={[
            ["CDFX", `/api/change-sets/${changeSetId}/cdfx`],
            ["CSV", `/api/change-sets/${changeSetId}/csv`],
          ]}
        />
      )}
      {revision && (
        <Files
          words={`All values of R${revision.number}`}
          files={[
            ["CDFX", `/api/revisions/${revision.id}/values?format=cdfx`],
            ["CSV", `/api/revisions/${revision.id}/values?format=csv`],
          ]}
        />
      )}
    </p>
  );
}

function Files({ words, files }: { words: string; files: readonly (readonly [string, string])[] }) {
  return (
    <span>
      {words}:
      {files.map(([name, href]) => (
        <a key={name} href={href} className="link ml-2" aria-label={`${words} as ${name}`}>
          {name}
        </a>
      ))}
    </span>
  );
}
