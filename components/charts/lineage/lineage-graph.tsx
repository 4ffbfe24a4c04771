import Link from "next/link";
import type { ComponentProps, ReactNode } from "react";
import { type LineageRow, lineageLayout } from "@/components/charts/lineage/lineage-layout";
import { LineageMark, type LineageState, STATE_PHRASE } from "@/components/charts/lineage/lineage-mark";
import { Tag } from "@/components/ui/data/tag";
import { cn } from "@/lib/cn";

export interface LineageNode {
  id: string;
  parentId: string | null;
  /** Short name, e.g. "R15". */
  label: string;
  title: string;
  state: LineageState;
  href: ComponentProps<typeof Link>["href"];
  /** Instead of the plain state, e.g. "stood 3 Oct – 12 Nov". */
  statePhrase?: ReactNode;
  /** Second line: author, number of runs, gates, reason. */
  detail?: ReactNode;
  /** Buttons or links at the right. */
  actions?: ReactNode;
}

export interface LineageGraphProps {
  /** Newest first, children before parents. */
  nodes: readonly LineageNode[];
  /** Name for assistive technology, e.g. "Lineage of Estate 2.0 petrol". */
  label: string;
}

const LANE = 24;
/** Distance of a mark from the top of its row, px; the row's first line of text stands there. */
const MARK_Y = 28;

/** The lineage: a list, newest on top, with a graph in its gutter. One column a line of work; the line that stands is the first. */
export function LineageGraph({ nodes, label }: LineageGraphProps) {
  const standing = nodes.find((node) => node.state === "stands");
  const { rows, lanes } = lineageLayout(nodes, (standing ?? nodes[0])?.id ?? null);
  const width = lanes * LANE;
  return (
    <ol aria-label={label} reversed className="flex flex-col">
      {nodes.map((node, index) => {
        const row = rows[index];
        const stands = node.state === "stands";
        return (
          <li
            key={node.id}
            className={cn(
              "relative flex gap-3 border-line border-t pr-4 pl-3 first:border-t-0",
              stands && "bg-sunk",
            )}
          >
            {row && <RowGutter row={row} width={width} state={node.state} />}
            <div className="flex min-w-0 flex-1 flex-wrap items-start justify-between gap-x-4 gap-y-1 py-3">
              <div className="min-w-0 flex-1 basis-56">
                <p className="flex flex-wrap items-center gap-x-3 gap-y-1">
                  <Link href={node.href} className="group inline-flex min-h-8 min-w-0 items-center gap-2.5">
                    <Tag tone={stands ? "strong" : "plain"}>{node.label}</Tag>
                    <span className="font-semibold text-15 group-hover:underline">{node.title}</span>
                  </Link>
                  <span className={cn("text-15", stands ? "font-semibold text-action" : "text-ink2")}>
                    {node.statePhrase ?? STATE_PHRASE[node.state]}
                  </span>
                </p>
                {node.detail && <div className="text-13 text-ink2">{node.detail}</div>}
              </div>
              {node.actions && (
                <div className="no-print flex flex-wrap items-center gap-2">{node.actions}</div>
              )}
            </div>
          </li>
        );
      })}
    </ol>
  );
}

/** The piece of the graph beside one row. Heights in percent, so that a row may be as tall as its text. */
function RowGutter({ row, width, state }: { row: LineageRow; width: number; state: LineageState }) {
  const centre = (lane: number) => lane * LANE + LANE / 2;
  const at = centre(row.lane);
  return (
    <div className="relative shrink-0 self-stretch">
      <svg aria-hidden="true" width={width} height="1" />
      <svg
        aria-hidden="true"
        width={width}
        fill="none"
        strokeWidth="2"
        className="absolute inset-y-0 left-0 h-full stroke-edge"
      >
        {row.through.map((lane) => (
          <line key={lane} x1={centre(lane)} x2={centre(lane)} y1="-1" y2="100%" />
        ))}
        {row.joins.map((lane) => {
          const from = centre(lane);
          return from === at ? (
            <line key={lane} x1={at} x2={at} y1="-1" y2={MARK_Y} />
          ) : (
            <path key={lane} d={`M${from} -1V4C${from} ${MARK_Y - 6} ${at} ${MARK_Y - 14} ${at} ${MARK_Y}`} />
          );
        })}
        {row.continues && <line x1={at} x2={at} y1={MARK_Y} y2="100%" />}
        <LineageMark state={state} x={at} y={MARK_Y} />
      </svg>
    </div>
  );
}
