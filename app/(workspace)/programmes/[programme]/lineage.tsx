import type { Route } from "next";
import Link from "next/link";
import { openComparisonAction } from "@/app/(workspace)/comparisons/actions";
import { LineageGraph, type LineageNode } from "@/components/charts/lineage/lineage-graph";
import { OpenComparisonForm } from "@/components/features/comparisons/open-comparison-form";
import { gateCount } from "@/components/features/gates/gate-list";
import { drawnState, runsText, statePhrase } from "@/components/features/programmes/lineage-words";
import type { ProgrammeOverview } from "@/lib/services/programmes/get";
import { isInFlight, type LineageRevision } from "@/lib/services/programmes/lineage";

function actionsOf(overview: ProgrammeOverview, revision: LineageRevision) {
  const { standing, may, programme } = overview;
  if (standing && may.compare.ok && isInFlight(revision)) {
    return (
      <OpenComparisonForm
        revisionAId={standing.id}
        revisionBId={revision.id}
        label={`Compare with R${standing.number}`}
        blockedBecause={null}
        action={openComparisonAction}
      />
    );
  }
  const stoodEarlier = revision.stoodFrom !== null && revision.id !== standing?.id && !revision.barredAt;
  if (!stoodEarlier || !may.rollBack.ok) return undefined;
  return (
    <Link
      href={`/programmes/${programme.id}/roll-back?to=${revision.id}` as Route}
      className="link inline-flex min-h-8 items-center text-15"
    >
      Roll back to this
    </Link>
  );
}

function toNode(overview: ProgrammeOverview, revision: LineageRevision): LineageNode {
  const gates = overview.gates.get(revision.id);
  const [newest] = revision.decisions;
  const asked = gates?.some((gate) => gate.level !== "off");
  return {
    id: revision.id,
    parentId: revision.parentId,
    label: `R${revision.number}`,
    title: revision.title,
    state: drawnState(revision),
    statePhrase: statePhrase(revision),
    href: `/revisions/${revision.id}` as Route,
    detail: (
      <>
        {revision.authorName ?? "somebody"} · {runsText(revision.runs)}
        {gates && asked && <> · gates: {gateCount(gates)}</>}
        {newest && (
          <>
            {" · "}
            <Link href={`/records/${newest.id}` as Route} className="hover:underline">
              record {String(newest.recordNumber).padStart(3, "0")}
            </Link>
          </>
        )}
        {newest?.kind === "turn_down" && <span className="block">Turned down: {newest.reason}</span>}
      </>
    ),
    actions: actionsOf(overview, revision),
  };
}

/** The lineage of the programme with what each revision has behind it. */
export function ProgrammeLineage({ overview }: { overview: ProgrammeOverview }) {
  return (
    <LineageGraph
      label={`Lineage of ${overview.programme.name}`}
      nodes={overview.lineage.map((revision) => toNode(overview, revision))}
    />
  );
}
