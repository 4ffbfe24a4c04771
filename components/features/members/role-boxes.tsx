import { Checkbox } from "@/components/ui/form/checkbox";
import { FieldError } from "@/components/ui/form/field";
import { ROLES, type Role } from "@/lib/policy/actor";

/** What each role is for, in one line. */
const ROLE_WORDS: Record<Role, string> = {
  reader: "sees released revisions of programmes shared with them",
  tester: "opens road days, attaches runs, asks for decisions",
  calibrator: "adds revisions, asks for decisions",
  lead: "edits gates, decides, waives, rolls back",
  admin: "manages people and settings, decides nothing",
};

/** Roles to choose, with what each is for. */
export function RoleBoxes({ chosen = [], error }: { chosen?: readonly Role[]; error?: string }) {
  return (
    <fieldset>
      <legend className="font-semibold text-15">Roles</legend>
      {ROLES.map((role) => (
        <Checkbox
          key={role}
          name="roles"
          value={role}
          defaultChecked={chosen.includes(role)}
          label={
            <>
              <span className="capitalize">{role}</span>{" "}
              <span className="text-13 text-ink2">{ROLE_WORDS[role]}</span>
            </>
          }
        />
      ))}
      {error && <FieldError>{error}</FieldError>}
    </fieldset>
  );
}
