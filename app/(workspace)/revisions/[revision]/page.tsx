import type { Metadata } from "next";
import { z } from "zod";
import { openComparisonAction } from "@/app/(workspace)/comparisons/actions";
import { askForChangesAction, lookedAtAction } from "@/app/(workspace)/revisions/[revision]/actions";
import { AddDescriptionForm } from "@/app/(workspace)/revisions/[revision]/add-description";
import {
  adoptAction,
  askForDecisionAction,
  bringBackAction,
  editRevisionAction,
  setAsideAction,
  startValidatingAction,
  withdrawAction,
} from "@/app/(workspace)/revisions/actions";
import { ChangeSetSection } from "@/components/features/change-sets/change-set-section";
import { ChangesWatch } from "@/components/features/change-sets/changes-watch";
import { CheckValuesFile } from "@/components/features/change-sets/check-values-file";
import { viewFromParameters } from "@/components/features/change-sets/list/view-address";
import { ValueDownloads } from "@/components/features/change-sets/value-downloads";
import { OpenComparisonForm } from "@/components/features/comparisons/open-comparison-form";
import { DescriptionUnderstood } from "@/components/features/descriptions/description-understood";
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
import { Disclosure } from "@/components/ui/layout/disclosure";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { Notice } from "@/components/ui/status/notice";
import { requireCtx } from "@/lib/auth/current";
import { ForbiddenError } from "@/lib/errors";
import { orNotFound, orRefused } from "@/lib/http/page";
import type { Facts } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import type { Action } from "@/lib/policy/rules";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import type { Ctx } from "@/lib/services/ctx";
import { getRevision } from "@/lib/services/revisions/get";

export const metadata: Metadata = { title: "Revision" };

/** What it changes; null for somebody who may see the revision but no difference. An address that names no revision asks for none. */
async function changesOrNone(ctx: Ctx, revisionId: string, against: string | null) {
  const againstId = z.uuid().safeParse(against).data;
  try {
    return await getRevisionChanges(ctx, revisionId, againstId);
  } catch (error) {
    if (error instanceof ForbiddenError) return null;
    throw error;
  }
}

/** A revision: what differs from its parent first, then what it states, its runs, and the next step. */
export default async function RevisionPage({ params, searchParams }: PageProps<"/revisions/[revision]">) {
  const ctx = await requireCtx();
  const { revision: id } = await params;
  const found = await orNotFound(id, (revisionId) => getRevision(ctx, revisionId));
  const { revision, programme, parent, standing, runs, decisions, missing, authorName } = found;
  const reasonAgainst = (action: Action, facts: Facts = { ownerId: revision.authorId }) => {
    const verdict = can(ctx, action, facts);
    return verdict.ok ? null : verdict.reason;
  };
  const asked = viewFromParameters(await searchParams);
  const view = await orRefused(() => changesOrNone(ctx, revision.id, asked.against));
  const described = view?.descriptions.after ?? null;
  const mayDescribe =
    !revision.setAsideAt &&
    reasonAgainst(
      "revision.describe",
      described ? { ownerId: revision.authorId } : { ownerId: ctx.userId },
    ) === null &&
    (described === null || revision.state === "draft");
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
          <p className="flex flex-wrap gap-x-4 self-center text-15">
            <a className="link" href="#next-step">
              Next step
            </a>
            {canDownload && (
              <a className="link" href={`/api/revisions/${revision.id}/image`}>
                Download the image
              </a>
            )}
          </p>
        }
      />
      {revision.barredAt && (
        <Notice tone="problem" title="Barred">
          {revision.barredReason}
        </Notice>
      )}
      {view && (
        <ChangeSetSection
          view={view}
          asked={asked}
          refused={{ ask: reasonAgainst("change_set.ask"), look: reasonAgainst("change_set.look_at") }}
          actions={{ ask: askForChangesAction, look: lookedAtAction }}
          downloads={
            reasonAgainst("values.export") === null && (
              <>
                <ValueDownloads
                  changeSetId={view.changes && view.changes.readBy !== "none" ? view.changeSetId : null}
                  revision={described?.state === "read" ? revision : null}
                />
                <CheckValuesFile
                  revision={{ id: revision.id, number: revision.number }}
                  described={described?.state ?? null}
                />
              </>
            )
          }
          watch={
            view.changeSetId && (
              <ChangesWatch
                changeSetId={view.changeSetId}
                shown={{ state: view.state, coverage: view.coverage.state }}
              />
            )
          }
          describe={
            mayDescribe && (
              <p className="text-15">
                With a description the same bytes are maps, curves and values in physical units.{" "}
                <a href="#description" className="link">
                  Add the description
                </a>
              </p>
            )
          }
        />
      )}
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,2fr)_minmax(0,1fr)]">
        <div className="flex min-w-0 flex-col gap-6">
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
          <div id="next-step">
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
          </div>
          <Card title="Image">
            <ImageUnderstood
              fileName={revision.imageFileName}
              sizeBytes={revision.imageBytes}
              sha256={revision.imageSha256}
              summary={revision.imageSummary}
            />
          </Card>
          {view && (
            <Card title="Description" id="description">
              <div className="flex flex-col gap-4">
                {described ? (
                  <DescriptionUnderstood description={described} epk={view.epk} />
                ) : (
                  <p className="text-15">It has none of its own.</p>
                )}
                {mayDescribe &&
                  (described ? (
                    <Disclosure summary="Give it another one">
                      <AddDescriptionForm
                        key={described.id}
                        revisionId={revision.id}
                        rowVersion={revision.rowVersion}
                        label="Replace the description"
                      />
                    </Disclosure>
                  ) : (
                    <AddDescriptionForm
                      revisionId={revision.id}
                      rowVersion={revision.rowVersion}
                      label="Add the description"
                    />
                  ))}
              </div>
            </Card>
          )}
          <RevisionDecisions decisions={decisions} />
        </div>
      </div>
    </div>
  );
}
