/** A revision as the graph needs it: which it is and what it came from. */
export interface LineageLink {
  id: string;
  parentId: string | null;
}

/** How one row of the graph is drawn; lanes count from 0 at the left. */
export interface LineageRow {
  id: string;
  lane: number;
  /** Lanes whose line runs through the row from top to bottom, without touching its mark. */
  through: number[];
  /** Lanes whose line ends in this mark from above, because a child of it stands higher up. */
  joins: number[];
  /** The line goes on below, to the parent. */
  continues: boolean;
}

export interface LineageLayout {
  rows: LineageRow[];
  /** Number of lanes in use at the widest place. */
  lanes: number;
}

/**
 * Gives every revision a lane, one per line of work. `links` come newest first, each child before its parent.
 * The line of `mainId` and its ancestors keeps lane 0; others take the lowest lane that is free. A parent that is not
 * in the list ends its line. O(n × lanes).
 */
export function lineageLayout(links: readonly LineageLink[], mainId: string | null): LineageLayout {
  const byId = new Map(links.map((link) => [link.id, link]));
  const main = new Set<string>();
  for (let at = mainId === null ? undefined : byId.get(mainId); at; at = byId.get(at.parentId ?? ""))
    main.add(at.id);

  // Which revision each lane is waiting for, from the rows above.
  const waiting: (string | null)[] = [null];
  const rows: LineageRow[] = [];
  let lanes = 1;
  for (const link of links) {
    const joins = waiting.flatMap((id, lane) => (id === link.id ? [lane] : []));
    const lane = laneFor(link, joins, main, waiting);
    for (const join of joins) waiting[join] = null;
    const through = waiting.flatMap((id, index) => (id !== null && index !== lane ? [index] : []));
    const continues = link.parentId !== null && byId.has(link.parentId);
    waiting[lane] = continues ? link.parentId : null;
    lanes = Math.max(lanes, waiting.length);
    rows.push({ id: link.id, lane, through, joins, continues });
  }
  return { rows, lanes };
}

function laneFor(
  link: LineageLink,
  joins: readonly number[],
  main: ReadonlySet<string>,
  waiting: (string | null)[],
): number {
  if (main.has(link.id)) return 0;
  const inherited = joins.find((lane) => lane !== 0 || main.size === 0);
  if (inherited !== undefined) return inherited;
  const lowest = main.size > 0 ? 1 : 0;
  for (let lane = lowest; ; lane += 1) {
    if (waiting[lane] === undefined) waiting[lane] = null;
    if (waiting[lane] === null) return lane;
  }
}
