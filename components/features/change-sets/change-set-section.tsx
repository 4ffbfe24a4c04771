import type { Route } from "next";
import type { ReactNode } from "react";
import { AgainstForm } from "@/components/features/change-sets/against-form";
import { type AskAction, AskForm } from "@/components/features/change-sets/ask-form";
import { ChangeSetWalk } from "@/components/features/change-sets/change-set-walk";
import { CoverageNote } from "@/components/features/change-sets/coverage-note";
import {
  BYTES_KEY,
  type ChangesView,
  changeAddress,
} from "@/components/features/change-sets/list/view-address";
import { type LookedAtAction, LookedAtProvider } from "@/components/features/change-sets/walk/looked-at";
import { WarningList } from "@/components/features/change-sets/warning-list";
import { summarySentence } from "@/components/features/change-sets/words/change-words";
import { warningsOf } from "@/components/features/change-sets/words/warnings";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";

export interface ChangeSetSectionProps {
  view: RevisionChangesView;
  asked: ChangesView;
  /** Reasons of the policy; null = allowed. */
  refused: { ask: string | null; look: string | null };
  actions: { ask: AskAction; look: LookedAtAction };
  downloads: ReactNode;
  /** Watches what is being worked out; shown while something is. */
  watch: ReactNode;
  /** A way to a description, where there is none. */
  describe: ReactNode;
}

/** What a revision does to the engine: one sentence, what to know first, then change by change. */
export function ChangeSetSection(props: ChangeSetSectionProps) {
  const { view, asked, downloads } = props;
  const title = view.against ? `What differs from R${view.against.number}` : "What differs";
  return (
    <Card title={title} actions={<AgainstForm view={view} order={asked.order} />}>
      <div className="flex flex-col gap-4">
        <Body {...props} />
        {downloads}
      </div>
    </Card>
  );
}

function Body({ view, asked, refused, actions, watch, describe }: ChangeSetSectionProps) {
  const { changes, against, changeSetId, revision, state } = view;
  if (!against)
    return (
      <p className="text-15">This is the first image of its line: there is nothing to set it against.</p>
    );
  const setting = (page: string) => `/programmes/${revision.programmeId}/${page}` as Route;
  const hrefs = {
    bytes: changeAddress(revision.id, { ...asked, change: BYTES_KEY }),
    regions: setting("checksum-regions"),
    marks: setting("relevance"),
  };
  const warnings = <WarningList warnings={warningsOf(view)} hrefs={hrefs} />;
  const ask = (label: string) => (
    <AskForm
      revisionId={revision.id}
      againstId={against.id}
      label={label}
      blockedBecause={refused.ask}
      action={actions.ask}
    />
  );
  if (state === "failed")
    return (
      <>
        <Notice tone="problem">{view.failure ?? "The two could not be set against each other."}</Notice>
        {ask("Try again")}
      </>
    );
  if (state === "not_asked") return ask(`Set R${revision.number} against R${against.number}`);
  if (!changes)
    return (
      <>
        <p className="text-15">The two are being set against each other.</p>
        {watch}
      </>
    );
  return (
    <LookedAtProvider
      lookedAt={view.lookedAt}
      revisionId={revision.id}
      changeSetId={changeSetId ?? ""}
      action={actions.look}
    >
      <p className="max-w-prose text-17">{summarySentence(changes, against.number)}</p>
      {view.coverage.state === "computing" && watch}
      {warnings}
      {changes.readBy === "none" && describe}
      {changes.readBy !== "none" && (
        <CoverageNote
          coverage={view.coverage}
          linksHref={setting(`axis-links?revision=${revision.id}&against=${against.id}`)}
          ask={ask("Work it out")}
        />
      )}
      <ChangeSetWalk
        view={{ ...view, changes, against }}
        asked={asked}
        mayLook={refused.look === null && changeSetId !== null}
      />
    </LookedAtProvider>
  );
}
