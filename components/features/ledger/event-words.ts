/** What happened, in words, by the name of the event; `{it}` is the thing. An event that is not here is told by its name. */
const WORDS: Record<string, string> = {
  "workspace.created": "Made the workspace",
  "workspace.updated": "Changed the workspace",
  "member.invited": "Invited somebody",
  "member.invitation_withdrawn": "Withdrew an invitation",
  "member.joined": "Joined the workspace",
  "member.renamed": "Changed their name",
  "member.role_changed": "Changed the roles of {it}",
  "member.disabled": "Disabled {it}",
  "passphrase.set": "Set their signing passphrase",
  "programme.created": "Made {it}",
  "programme.updated": "Changed name or goal of {it}",
  "programme.archived": "Archived {it}",
  "programme.unarchived": "Took {it} out of the archive",
  "programme.shared": "Shared {it}",
  "programme.share_ended": "Ended a share",
  "vehicle.versioned": "Saved a new version of the vehicle sheet",
  "plan.versioned": "Saved a new version of the gate plan",
  "revision.created": "Added {it}",
  "revision.updated": "Edited {it}",
  "revision.validating": "Started validating {it}",
  "revision.submitted": "Asked for a decision on {it}",
  "revision.withdrawn": "Withdrew {it}",
  "revision.set_aside": "Set {it} aside",
  "revision.brought_back": "Brought {it} back",
  "revision.downloaded": "Downloaded the image of {it}",
  "revision.described": "Gave {it} a description",
  "values.exported": "Downloaded values of {it}",
  "revision.as_found": "Adopted {it} as found",
  "revision.barred": "Barred {it}",
  "road_day.created": "Opened a road day",
  "road_day.updated": "Changed a road day",
  "run.attached": "Attached {it}",
  "run.updated": "Edited {it}",
  "run.excluded": "Set {it} aside",
  "run.included": "Brought {it} back",
  "run.downloaded": "Downloaded the log of {it}",
  "run.refused_rows_downloaded": "Downloaded the refused rows of {it}",
  "channel_key.saved": "Saved a channel key on {it}",
  "relevance_marks.versioned": "Marked emission- and safety-relevant functions",
  "axis_links.versioned": "Linked axes to channels",
  "checksum_regions.versioned": "Declared checksum regions",
  "channel_key.applied": "Chose the channel key of {it}",
  "compare.saved": "Opened a comparison",
  "compare.exported": "Exported a comparison",
  "analysis.settings_changed": "Changed the settings of a comparison",
  "gate.waived": "Waived a gate",
  "decision.promoted": "Promoted {it}",
  "decision.agreed": "Agreed to {it} as second lead",
  "decision.rejected": "Turned {it} down",
  "decision.rolled_back": "Rolled back to {it}",
};

const THINGS: Record<string, string> = {
  member: "a member",
  programme: "the programme",
  revision: "a revision",
  run: "a run",
  decision: "a revision",
};

interface Happened {
  event: string;
  subjectType: string;
  data: Record<string, unknown>;
}

/** The name of the thing where the entry tells it: "R5", "run 0029". */
function nameOf({ event, subjectType, data }: Happened): string {
  const to = data.to as { number?: unknown } | undefined;
  const number = typeof to?.number === "number" ? to.number : data.number;
  if (typeof number === "number") {
    if (subjectType === "run") return `run ${String(number).padStart(4, "0")}`;
    if (subjectType === "revision" || subjectType === "decision") return `R${number}`;
  }
  if (subjectType === "member" && typeof data.name === "string") return data.name;
  return event.startsWith("revision.") ? "a revision" : (THINGS[subjectType] ?? "it");
}

export function eventWords(entry: Happened): string {
  const { event, data } = entry;
  if (event === "decision.rejected" && data.kind === "hold") return `Held ${nameOf(entry)} for more runs`;
  const known = WORDS[event];
  if (known) return known.replace("{it}", nameOf(entry));
  const text = event.replaceAll(/[._]/g, " ");
  return text.charAt(0).toUpperCase() + text.slice(1);
}

const PLACES: Record<string, string> = {
  programme: "/programmes/",
  revision: "/revisions/",
  road_day: "/road-days/",
  run: "/runs/",
  comparison: "/comparisons/",
  decision: "/records/",
};

/** Where the thing that an entry is about can be seen, or null. */
export function subjectPath(subjectType: string, subjectId: string | null): string | null {
  if (subjectType === "member") return "/members";
  const place = PLACES[subjectType];
  return place && subjectId ? place + subjectId : null;
}
