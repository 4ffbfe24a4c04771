import { cleanup, fireEvent, render, screen, waitFor } from "@testing-library/react";
import { afterEach, describe, expect, test, vi } from "vitest";
import { DecisionForm, type DecisionFormProps } from "@/components/features/decisions/decision-form";
import type { GateResult } from "@/lib/gates/plan";

afterEach(cleanup);

const ID = "5f0b2a43-8a1e-4c57-9d0e-0d5f4f6a7b11";
const GATE: GateResult = {
  id: "no_loss",
  kind: "no_loss",
  level: "must",
  state: "not_met",
  title: "No loss beyond 1 %",
  why: "The band lies below −1 % at 5,300 to 5,900 per minute.",
  next: "Change the image.",
};

function show(parts: Partial<DecisionFormProps> = {}) {
  const action = vi.fn(async (_input: unknown) => ({ ok: true }) as { ok: boolean; message?: string });
  render(
    <DecisionForm
      seen={{
        revisionId: ID,
        rowVersion: 4,
        standingRevisionId: ID,
        comparisonId: ID,
        inputSha256: "a".repeat(64),
        shownInputSha256: "a".repeat(64),
        gatePlanVersion: 2,
        calibrationSha256: "c".repeat(64),
      }}
      needsApproval={false}
      agreedBy={[]}
      number={15}
      standingNumber={14}
      openGates={[]}
      blocked={{ promote: null, sendBack: null, waive: null }}
      hasPassphrase
      peopleTold={4}
      action={action}
      {...parts}
    />,
  );
  return action;
}

const type = (label: RegExp, value: string) =>
  fireEvent.change(screen.getByLabelText(label), { target: { value } });
const choose = (label: RegExp) => fireEvent.click(screen.getByRole("radio", { name: label }));
const sign = (name: RegExp) => fireEvent.click(screen.getByRole("button", { name }));

describe("the countersign form", () => {
  test("says what will happen and sends exactly what the lead had in view", async () => {
    const action = show();
    choose(/^Promote/);
    expect(screen.getByText(/R15 stands; R14 is superseded.*4 people are told/)).toBeTruthy();
    type(/^Reason/, "gain shown, nothing lost");
    type(/Number of the revision/, "R15");
    type(/passphrase/, "out and back again");
    sign(/Sign and promote R15/);
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    expect(action.mock.calls[0]?.[0]).toEqual({
      kind: "promote",
      revisionId: ID,
      rowVersion: 4,
      standingRevisionId: ID,
      comparisonId: ID,
      inputSha256: "a".repeat(64),
      shownInputSha256: "a".repeat(64),
      gatePlanVersion: 2,
      calibrationSha256: "c".repeat(64),
      approval: null,
      reason: "gain shown, nothing lost",
      typedNumber: "R15",
      passphrase: "out and back again",
      waivers: [],
    });
  });

  test("names what is missing in a field before anything is sent", async () => {
    const action = show();
    choose(/^Hold/);
    sign(/Sign and hold/);
    expect(await screen.findByText(/Write the reason/)).toBeTruthy();
    expect(screen.getByText(/Sign with your passphrase/)).toBeTruthy();
    expect(action).not.toHaveBeenCalled();
  });

  test("can't promote past a must gate that is not met until it is waived with 20 characters", async () => {
    const action = show({ openGates: [GATE] });
    choose(/^Promote/);
    const button = screen.getByRole("button", { name: /Sign and promote/ });
    expect(button.getAttribute("aria-disabled")).toBe("true");
    expect(screen.getByText(/One must gate is not met and not waived/)).toBeTruthy();
    fireEvent.click(screen.getByRole("checkbox", { name: /Waive this gate/ }));
    type(/Reason for the waiver/, "too short");
    type(/^Reason(?! for)/, "the customer asked");
    type(/Number of the revision/, "15");
    type(/passphrase/, "out and back again");
    sign(/Sign and promote/);
    expect(await screen.findByText(/at least 20 characters: it stays/)).toBeTruthy();
    type(/Reason for the waiver/, "above the range that the customer drives in");
    sign(/Sign and promote/);
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    expect(action.mock.calls[0]?.[0]).toMatchObject({
      waivers: [{ gateId: "no_loss", reason: "above the range that the customer drives in" }],
    });
  });

  test("a hold carries no waiver and no typed number, whatever was filled in before", async () => {
    const action = show({ openGates: [GATE] });
    choose(/^Promote/);
    fireEvent.click(screen.getByRole("checkbox", { name: /Waive this gate/ }));
    type(/Number of the revision/, "15");
    choose(/^Hold/);
    type(/^Reason/, "two more twins");
    type(/passphrase/, "out and back again");
    sign(/Sign and hold/);
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    const sent = action.mock.calls[0]?.[0];
    expect(sent).toMatchObject({ kind: "hold" });
    expect(sent).not.toHaveProperty("waivers");
    expect(sent).not.toHaveProperty("typedNumber");
  });

  test("keeps what was written and says why when the server refuses", async () => {
    const action = show();
    action.mockResolvedValue({ ok: false, message: "R15 is no longer in review: it is turned down." });
    choose(/^Turn down/);
    type(/^Reason/, "a loss is shown");
    type(/passphrase/, "out and back again");
    sign(/Sign and turn down/);
    expect(await screen.findByText(/no longer in review/)).toBeTruthy();
    expect((screen.getByLabelText(/^Reason/) as HTMLTextAreaElement).value).toBe("a loss is shown");
    expect((screen.getByLabelText(/passphrase/) as HTMLInputElement).value).toBe("");
  });

  test("shows the author why it is not theirs to decide, and offers nothing to fill in", () => {
    const reason = "You can't promote this revision: you made it, so another lead decides.";
    show({ blocked: { promote: reason, sendBack: reason, waive: reason } });
    expect(screen.getAllByText(reason).length).toBeGreaterThan(0);
    expect(screen.queryByLabelText(/passphrase/)).toBeNull();
  });

  test("asks for a document where marked functions are changed for the road, unless a second lead agreed", async () => {
    const action = show({ needsApproval: true });
    choose(/^Promote/);
    type(/^Reason/, "gain shown");
    type(/Number of the revision/, "R15");
    type(/passphrase/, "out and back again");
    sign(/Sign and promote R15/);
    expect(screen.getByText(/Name the approval document and its issuer/)).toBeTruthy();
    expect(action).not.toHaveBeenCalled();
    type(/^Approval document/, "Report 17");
    type(/^Issued by/, "Test house");
    sign(/Sign and promote R15/);
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    expect(action.mock.calls[0]?.[0]).toMatchObject({
      approval: { document: "Report 17", issuer: "Test house" },
    });
    cleanup();
    show({ needsApproval: true, agreedBy: ["A second lead"] });
    choose(/^Promote/);
    expect(screen.getByText(/A second lead agreed as second lead/)).toBeTruthy();
    expect(screen.queryByText(/Name the approval document and its issuer/)).toBeNull();
  });
});
