import type { Role } from "@/lib/policy/actor";

/** How far a role may go: allow; own = only what this person made; granted = what was shared; masked = without details. */
export type Cell = "allow" | "own" | "granted" | "masked" | "not-author";

export interface Rule {
  /** Row of authorisation.csv that the rule carries out; a test compares every cell. */
  row: string;
  /** What the sentence of a refusal calls it: "You can't … ". */
  doing: string;
  cells: Partial<Record<Role, Cell>>;
}

const staff = { tester: "allow", calibrator: "allow", lead: "allow" } as const;
const everybody = { reader: "granted", ...staff, admin: "allow" } as const;

/** Every action there is so far. A role that is not named is refused. */
export const RULES = {
  "workspace.view": { row: "W01", doing: "see this workspace", cells: { ...everybody, reader: "allow" } },
  "workspace.update": { row: "W03", doing: "change the workspace", cells: { admin: "allow" } },
  "member.list": { row: "M01", doing: "see the members", cells: { ...everybody, reader: "masked" } },
  "member.invite": { row: "M02", doing: "invite members", cells: { admin: "allow" } },
  "member.change_role": { row: "M03", doing: "change roles", cells: { admin: "allow" } },
  "member.disable": { row: "M04", doing: "disable members", cells: { admin: "allow" } },
  "programme.view": { row: "P01", doing: "see this programme", cells: everybody },
  "programme.edit": {
    row: "P02",
    doing: "create or edit programmes",
    cells: { calibrator: "allow", lead: "allow", admin: "allow" },
  },
  "programme.archive": { row: "P03", doing: "archive programmes", cells: { lead: "allow", admin: "allow" } },
  "programme.share": { row: "P04", doing: "share a programme", cells: { lead: "allow", admin: "allow" } },
  "vehicle.version": { row: "H01", doing: "change the vehicle sheet", cells: staff },
  "gate_plan.version": { row: "G01", doing: "change the gate plan", cells: { lead: "allow" } },
  "relevance_marks.version": {
    row: "G03",
    doing: "mark emission- and safety-relevant functions",
    cells: { lead: "allow" },
  },
  "gate.waive": { row: "G02", doing: "waive a gate of this revision", cells: { lead: "not-author" } },
  "revision.view": { row: "V01", doing: "see this revision", cells: everybody },
  "revision.download": { row: "V02", doing: "download images", cells: staff },
  "revision.upload": { row: "V03", doing: "upload an image", cells: { calibrator: "allow" } },
  "revision.upload_part": { row: "V04", doing: "continue this upload", cells: { calibrator: "own" } },
  "revision.create": { row: "V05", doing: "add a revision", cells: { calibrator: "own" } },
  "revision.edit": { row: "V06", doing: "edit this draft", cells: { calibrator: "own" } },
  "revision.validate": { row: "V07", doing: "start validating this revision", cells: { calibrator: "own" } },
  "revision.withdraw": { row: "V08", doing: "withdraw this revision", cells: { calibrator: "own" } },
  "revision.set_aside": { row: "V09", doing: "set this draft aside", cells: { calibrator: "own" } },
  "revision.compare_images": { row: "V11", doing: "compare images", cells: { reader: "granted", ...staff } },
  "revision.ask": { row: "V12", doing: "ask for a decision", cells: { tester: "allow", calibrator: "own" } },
  "revision.adopt": { row: "V13", doing: "adopt an image as found", cells: { lead: "allow" } },
  "revision.describe": {
    row: "V15",
    doing: "give this revision a description",
    cells: { calibrator: "own" },
  },
  "change_set.ask": { row: "V16", doing: "have changes worked out", cells: staff },
  "change_set.look_at": { row: "V17", doing: "mark changes as looked at", cells: staff },
  "values.export": { row: "V18", doing: "download values", cells: staff },
  "checksum_regions.version": {
    row: "V19",
    doing: "declare checksum regions",
    cells: { calibrator: "allow", lead: "allow" },
  },
  "revision.bar": { row: "V14", doing: "bar a revision", cells: { lead: "allow" } },
  "road_day.edit": {
    row: "O01",
    doing: "create or edit road days",
    cells: { tester: "allow", lead: "allow" },
  },
  "plan.view": { row: "O02", doing: "see plans and the workshop's own scatter", cells: staff },
  "analysis.view": { row: "N09", doing: "see what an analysis version moves", cells: staff },
  "run.view": { row: "N01", doing: "see this run", cells: everybody },
  "run.attach": { row: "N02", doing: "attach runs", cells: { tester: "allow" } },
  "run.edit": { row: "N03", doing: "edit this run", cells: { tester: "own", lead: "allow" } },
  "run.set_aside": { row: "N04", doing: "set this run aside", cells: { tester: "own", lead: "allow" } },
  "run.bring_back": { row: "N05", doing: "bring this run back", cells: { lead: "allow" } },
  "run.download": { row: "N06", doing: "download logs", cells: staff },
  "channel_key.save": {
    row: "K05",
    doing: "choose the columns of a log",
    cells: { tester: "allow", calibrator: "allow" },
  },
  "axis_links.version": {
    row: "K06",
    doing: "link axes to channels",
    cells: { tester: "allow", calibrator: "allow" },
  },
  "comparison.settings": { row: "N08", doing: "set analysis settings", cells: staff },
  "comparison.view": { row: "C01", doing: "see this comparison", cells: { reader: "granted", ...staff } },
  "comparison.export": {
    row: "C02",
    doing: "export this comparison",
    cells: { reader: "granted", ...staff },
  },
  "comparison.create": { row: "C03", doing: "save a comparison", cells: staff },
  "decision.view": { row: "D01", doing: "see this decision", cells: everybody },
  "decision.promote": { row: "D02", doing: "promote this revision", cells: { lead: "not-author" } },
  "decision.turn_down": {
    row: "D03",
    doing: "turn down or hold this revision",
    cells: { lead: "not-author" },
  },
  "decision.agree": { row: "D10", doing: "agree as second lead", cells: { lead: "not-author" } },
  "decision.roll_back": { row: "D05", doing: "roll back", cells: { lead: "allow" } },
  "ledger.view": { row: "T01", doing: "read the ledger", cells: { lead: "allow", admin: "allow" } },
  "history.view": { row: "T02", doing: "see this history", cells: { ...staff, admin: "allow" } },
} as const satisfies Record<string, Rule>;

export type Action = keyof typeof RULES;
