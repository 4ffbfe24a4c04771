/** What happened, in words, by the name of the event. An event that is not here is told by its name. */
const WORDS: Record<string, string> = {
  "workspace.created": "Made the workspace",
  "workspace.updated": "Changed the workspace",
  "member.invited": "Invited somebody",
  "member.invitation_withdrawn": "Withdrew an invitation",
  "member.joined": "Joined the workspace",
  "member.renamed": "Changed their name",
  "member.role_changed": "Changed the roles of a member",
  "member.disabled": "Disabled a member",
  "passphrase.set": "Set their signing passphrase",
  "programme.created": "Made the programme",
  "programme.updated": "Changed name or goal of the programme",
  "programme.archived": "Archived the programme",
  "programme.unarchived": "Took the programme out of the archive",
  "programme.shared": "Shared the programme",
  "programme.share_ended": "Ended a share",
  "vehicle.versioned": "Saved a new version of the vehicle sheet",
  "plan.versioned": "Saved a new version of the gate plan",
  "revision.created": "Added a revision",
  "revision.updated": "Edited a draft",
  "revision.validating": "Started validating a revision",
  "revision.submitted": "Asked for a decision",
  "revision.withdrawn": "Withdrew a revision",
  "revision.discarded": "Set a draft aside",
  "revision.set_aside": "Set a draft aside",
  "revision.brought_back": "Brought a draft back",
  "revision.downloaded": "Downloaded an image",
  "revision.as_found": "Adopted an image as found",
  "revision.barred": "Barred a revision",
  "road_day.created": "Opened a road day",
  "road_day.updated": "Changed a road day",
  "run.attached": "Attached a run",
  "run.judged": "Judged a run",
  "run.updated": "Edited a run",
  "run.excluded": "Set a run aside",
  "run.included": "Brought a run back",
  "run.downloaded": "Downloaded a log",
  "compare.saved": "Opened a comparison",
  "compare.exported": "Exported a comparison",
  "analysis.settings_changed": "Changed the settings of a comparison",
  "gate.waived": "Waived a gate",
  "decision.promoted": "Promoted a revision",
  "decision.rejected": "Turned a revision down",
  "decision.rolled_back": "Rolled back",
};

export function eventWords(event: string, data: Record<string, unknown> = {}): string {
  if (event === "decision.rejected" && data.kind === "hold") return "Held a revision for more runs";
  const known = WORDS[event];
  if (known) return known;
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
