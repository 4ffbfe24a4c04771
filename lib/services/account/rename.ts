import { selectUser, updateUserName } from "@/db/queries/people";
import { renamePersonSchema } from "@/lib/services/account/schema";
import { type Asker, appendToOwnLedgers } from "@/lib/services/asker";

/** Changes a person's own name from now on; what they did before keeps the name of its day. */
export async function renamePerson(asker: Asker, input: { name: string }): Promise<void> {
  const { name } = renamePersonSchema.parse(input);
  const { userId } = asker;
  await asker.db.transaction(async (tx) => {
    const before = await selectUser(tx, { userId });
    if (before?.name === name) return;
    await updateUserName(tx, { userId, name });
    await appendToOwnLedgers(tx, asker, {
      event: "member.renamed",
      subjectType: "member",
      subjectId: userId,
      data: { old: { name: before?.name ?? null }, new: { name } },
    });
  });
}
