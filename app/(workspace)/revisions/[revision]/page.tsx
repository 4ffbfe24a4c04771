import type { Metadata } from "next";
import { openComparisonAction } from "@/app/(workspace)/comparisons/actions";
import {
  adoptAction,
  askForDecisionAction,
  bringBackAction,
  editRevisionAction,
  setAsideAction,
  startValidatingAction,
  withdrawAction,
} from "@/app/(workspace)/revisions/actions";
import { OpenComparisonForm } from "@/components/features/comparisons/open-comparison-form";
import { ChangedRanges } from "@/components/features/revisions/changed-ranges";
import { EditRevisionForm } from "@/components/features/revisions/edit-form";
import { ImageUnderstood } from "@/components/features/revisions/image-understood";
import { NextStep } from "@/components/features/revisions/next-step";
import { RevisionDecisions } from "@/components/features/revisions/revision-decisions";
import { RevisionFacts } from "@/components/features/revisions/revision-facts";
import { RevisionRuns } from "@/components/features/revisions/revision-runs";
import { REVISION_STATE_WORDS } from "@/components/features/revisions/words";
import { ProgrammeCrumbs } from "@/components/features/shell/programme-crumbs";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { orNotFound } from "@/lib/http/page";
import type { Facts } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import type { Action } from "@/lib/policy/rules";
import { getImageDifference, getRevision } from "@/lib/services/revisions/get";

export const metadata: Metadata = { title: "Revision" };

/** A revision: what differs from its parent first, then what it states, its runs, and the next step. */
export default async function RevisionPage({ params }: PageProps<"/revisions/[revision]">) {
  const ctx = await requireCtx();
  const { revision: id } = await params;
  const found = await orNotFound(id, (revisionId) => getRevision(ctx, revisionId));
  const { revision, programme, parent, standing, runs, decisions, missing, authorName } = found;
  const reasonAgainst = (action: Action, facts: Facts = { ownerId: revision.authorId }) => {
    const verdict = can(ctx, action, facts);
    return verdict.ok ? null : verdict.reason;
  };
  const changes = reasonAgainst("revision.compare_images")
    ? null
    : await getImageDifference(ctx, revision.id);
  const state = revision.setAsideAt ? "set aside" : REVISION_STATE_WORDS[revision.state];
  const canDownload = reasonAgainst("revision.download") === null;
  const isOwnDraft = revision.state === "draft" && !revision.setAsideAt && !reasonAgainst("revision.edit");
  const refused = {
    validate: reasonAgainst("revision.validate"),
    ask: reasonAgainst("revision.ask"),
    withdraw: reasonAgainst("revision.withdraw"),
    setAside: reasonAgainst("revision.set_aside"),
    adopt: reasonAgainst("revision.adopt"),
  };
  const reference = standing && standing.id !== revision.id ? standing : parent;
  return (
    <div className="flex flex-col gap-6">
      <PageHeading
        above={<ProgrammeCrumbs programme={programme} then={[{ label: `R${revision.number}` }]} />}
        title={`R${revision.number} ${revision.title}`}
        marks={<Tag tone={revision.state === "promoted" ? "strong" : "plain"}>{state}</Tag>}
        actions={
          canDownload && (
            <a className="link self-center" href={`/api/revisions/${revision.id}/image`}>
              Download the image
            </a>
          )
        }
      />
      {revision.barredAt && (
        <Notice tone="problem" title="Barred">
          {revision.barredReason}
        </Notice>
      )}
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,2fr)_minmax(0,1fr)]">
        <div className="flex min-w-0 flex-col gap-6">
          <Card title={parent ? `What differs from R${parent.number}` : "What differs"}>
            {!parent && (
              <p>
                {revision.parentId
                  ? "Its parent was not released."
                  : "This is the first image of its line: there is no parent to differ from."}
              </p>
            )}
            {parent && changes && "difference" in changes && (
              <ChangedRanges difference={changes.difference} parentNumber={parent.number} />
            )}
            {changes && "failure" in changes && <Notice tone="problem">{changes.failure}</Notice>}
          </Card>
          <Card title="What the calibrator states">
            {isOwnDraft ? (
              <EditRevisionForm
                revisionId={revision.id}
                rowVersion={revision.rowVersion}
                text={revision}
                action={editRevisionAction}
              />
            ) : (
              <RevisionFacts {...revision} authorName={authorName} parentNumber={parent?.number ?? null} />
            )}
          </Card>
          <Card title="Runs" flush>
            <div className="px-2 pb-2 md:px-3">
              <RevisionRuns runs={runs} />
            </div>
          </Card>
        </div>
        <div className="flex min-w-0 flex-col gap-6">
          <NextStep
            revision={{
              id: revision.id,
              number: revision.number,
              state: revision.state,
              isSetAside: revision.setAsideAt !== null,
            }}
            standing={standing}
            missing={missing}
            refused={refused}
            actions={{
              validate: startValidatingAction,
              ask: askForDecisionAction,
              withdraw: withdrawAction,
              setAside: setAsideAction,
              bringBack: bringBackAction,
              adopt: adoptAction,
            }}
            compare={
              reference && (
                <OpenComparisonForm
                  revisionAId={reference.id}
                  revisionBId={revision.id}
                  label={`Compare with R${reference.number}`}
                  blockedBecause={reasonAgainst("comparison.create")}
                  action={openComparisonAction}
                />
              )
            }
          />
          <Card title="Image">
            <ImageUnderstood
              fileName={revision.imageFileName}
              sizeBytes={revision.imageBytes}
              sha256={revision.imageSha256}
              summary={revision.imageSummary}
            />
          </Card>
          <RevisionDecisions decisions={decisions} />
        </div>
      </div>
    </div>
  );
}
