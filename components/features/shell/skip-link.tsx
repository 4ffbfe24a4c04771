export const MAIN_ID = "content";

/** First stop of the Tab key on every page. */
export function SkipLink() {
  return (
    <a
      href={`#${MAIN_ID}`}
      className="sr-only z-50 rounded border border-edge bg-surface px-4 py-3 font-semibold text-15 focus:not-sr-only focus:absolute focus:top-2 focus:left-2"
    >
      Skip to the content
    </a>
  );
}
