/** Roles of a membership; a person may hold several. */
export const ROLES = ["reader", "tester", "calibrator", "lead", "admin"] as const;
export type Role = (typeof ROLES)[number];

/** Who asks: a member of the workspace that the thing belongs to. Strangers never get this far (404). */
export interface Actor {
  userId: string;
  roles: readonly Role[];
}

/** What a rule may need to know about the thing; absent = not so. */
export interface Facts {
  /** Who made or owns it. */
  ownerId?: string;
  authorId?: string;
  submitterId?: string | null;
  /** Whether another active person of the workspace holds the lead role. */
  otherActiveLead?: boolean;
  /** Whether the programme is shared with this reader and the revision is a released one. */
  granted?: boolean;
}

/** Either allowed, or not with a plain reason that button and server share. */
export type Verdict = { ok: true; selfReleased?: boolean } | { ok: false; reason: string };
