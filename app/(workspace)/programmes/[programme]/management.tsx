import {
  archiveProgrammeAction,
  editProgrammeAction,
  endShareAction,
  shareProgrammeAction,
} from "@/app/(workspace)/programmes/actions";
import { EditProgrammeForm, OneButtonForm, ShareForm } from "@/components/features/programmes/manage-forms";
import { Card } from "@/components/ui/layout/card";
import { Disclosure } from "@/components/ui/layout/disclosure";
import type { Ctx } from "@/lib/services/ctx";
import type { ProgrammeOverview } from "@/lib/services/programmes/get";
import { listShares } from "@/lib/services/programmes/share";

const reasonOf = (verdict: { ok: true } | { ok: false; reason: string }) =>
  verdict.ok ? null : verdict.reason;

async function Shares({ ctx, programmeId }: { ctx: Ctx; programmeId: string }) {
  const { shares, readers } = await listShares(ctx, programmeId);
  return (
    <div className="flex flex-col gap-4">
      <p className="max-w-prose text-15 text-ink2">
        A reader sees the revisions that stand or stood and the records of their decisions; no draft, no image
        bytes.
      </p>
      {shares.length > 0 && (
        <ul className="flex flex-col">
          {shares.map((share) => (
            <li
              key={share.userId}
              className="flex flex-wrap items-center justify-between gap-3 border-line border-t py-2 first:border-t-0"
            >
              <span className="text-15">
                {share.name ?? share.email}{" "}
                <span className="text-ink2">
                  {share.inForce ? `until ${share.expiresOn}` : `ran out on ${share.expiresOn}`}
                </span>
              </span>
              <OneButtonForm
                fields={{ programmeId, userId: share.userId }}
                label="End"
                action={endShareAction}
              />
            </li>
          ))}
        </ul>
      )}
      {readers.length === 0 ? (
        <p className="text-15 text-ink2">No member of this workspace is a reader yet. Invite one first.</p>
      ) : (
        <ShareForm programmeId={programmeId} readers={readers} action={shareProgrammeAction} />
      )}
    </div>
  );
}

/** Name and goal, shares, archive: what is needed seldom, folded away. Absent for whoever may do none of it. */
export function ProgrammeManagement({ ctx, overview }: { ctx: Ctx; overview: ProgrammeOverview }) {
  const { programme, may } = overview;
  if (!may.edit.ok && !may.share.ok && !may.archive.ok) return null;
  const { id, name, goal, rowVersion } = programme;
  const archived = programme.archivedAt !== null;
  return (
    <Card>
      <Disclosure summary="Name and goal">
        <EditProgrammeForm
          key={rowVersion}
          programme={{ id, name, goal, rowVersion }}
          blockedBecause={reasonOf(may.edit)}
          action={editProgrammeAction}
        />
      </Disclosure>
      <Disclosure summary="Share with a reader" className="border-line border-t">
        {may.share.ok ? (
          <Shares ctx={ctx} programmeId={id} />
        ) : (
          <p className="text-15 text-ink2">{may.share.reason}</p>
        )}
      </Disclosure>
      <Disclosure summary={archived ? "Take out of the archive" : "Archive"} className="border-line border-t">
        <OneButtonForm
          fields={{ programmeId: id, archived: archived ? "no" : "yes" }}
          label={archived ? "Take out of the archive" : "Archive this programme"}
          blockedBecause={reasonOf(may.archive)}
          action={archiveProgrammeAction}
        >
          <p className="max-w-prose text-15 text-ink2">
            {archived
              ? "It is listed among those in work again and takes new revisions and road days."
              : "It is no longer listed among those in work and takes nothing new. Nothing of it is removed, and it can be taken out again."}
          </p>
        </OneButtonForm>
      </Disclosure>
    </Card>
  );
}
