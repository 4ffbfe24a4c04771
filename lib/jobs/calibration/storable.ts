/**
 * A value as the database can keep it: JSON without undefined members, NUL characters and halves of surrogate pairs, which texts of
 * descriptions may hold. Digests are taken of this, so that they hold for what is read back.
 */
export function storable<T>(value: T): T {
  const text = JSON.stringify(value, (_key, member: unknown) =>
    typeof member === "string" ? member.replaceAll("\0", "\ufffd").replaceAll(/\p{Cs}/gu, "\ufffd") : member,
  );
  return JSON.parse(text) as T;
}
