import { ConflictError } from "@/lib/errors";

/** Nothing is added to an archived programme. @throws ConflictError */
export function refuseArchived(programme: { name: string; archivedAt: Date | null }): void {
  if (programme.archivedAt === null) return;
  throw new ConflictError(
    "programme_archived",
    `${programme.name} is archived. Take it out of the archive on its page, then try again.`,
  );
}
