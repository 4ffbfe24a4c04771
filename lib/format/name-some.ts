/** "A, B, C and 4 more": the first `most` names, and how many there are beside them. */
export function nameSome(names: readonly string[], most = 3): string {
  const left = names.length - most;
  return left > 0 ? `${names.slice(0, most).join(", ")} and ${left} more` : names.join(", ");
}
