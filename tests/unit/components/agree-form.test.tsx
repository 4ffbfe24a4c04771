import { cleanup, fireEvent, render, screen, waitFor } from "@testing-library/react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { AgreeForm, type AgreeFormProps } from "@/components/features/decisions/agree-form";
import { RecordCalibration } from "@/components/features/decisions/record-calibration";

afterEach(cleanup);

const LIMITER = { name: "limiter", relevance: "safety" as const, characteristics: ["rpm_limit"] };
const seen = {
  touched: [LIMITER],
  untold: false,
  touchedSha256: "a".repeat(64),
  needsApproval: true,
  agreements: [],
  agreeBlocked: null,
} satisfies AgreeFormProps["calibration"];

function form(calibration: Partial<AgreeFormProps["calibration"]>, action: AgreeFormProps["action"]) {
  return <AgreeForm revisionId="r" calibration={{ ...seen, ...calibration }} action={action} />;
}

describe("the second lead", () => {
  const no = async () => ({ ok: false, message: "The passphrase is not the one that was set." });

  it("sees what is marked, and agrees to exactly that", async () => {
    const action = vi.fn((_: unknown, _form: FormData) => no());
    render(form({}, action));
    expect(screen.getByRole("listitem").textContent).toBe("limiter, safety-relevant: rpm_limit");
    fireEvent.change(screen.getByLabelText(/Why you agree/), { target: { value: "looked through" } });
    fireEvent.change(screen.getByLabelText(/passphrase/), { target: { value: "words" } });
    fireEvent.click(screen.getByRole("button", { name: "Agree as second lead" }));
    await screen.findByText("The passphrase is not the one that was set.");
    await waitFor(() => expect(action).toHaveBeenCalledOnce());
    const sent = action.mock.calls[0]?.[1];
    expect([sent?.get("touchedSha256"), sent?.get("reason")]).toEqual(["a".repeat(64), "looked through"]);
  });

  it("is told where bytes without a description are changed", () => {
    render(form({ touched: [], untold: true }, no));
    expect(screen.getByText(/Bytes that no description covers are changed/)).toBeTruthy();
    expect(screen.getByRole("button", { name: "Agree as second lead" })).toBeTruthy();
  });

  it("hears it when they have agreed", () => {
    const { rerender } = render(form({}, no));
    const status = screen.getByRole("status");
    rerender(form({ agreeBlocked: "You have agreed to exactly this." }, no));
    expect(screen.getByRole("status")).toBe(status);
    expect(status.textContent).toBe("You have agreed to exactly this.");
    expect(screen.queryByRole("button")).toBeNull();
  });
});

describe("the record", () => {
  const record = {
    ...{ resultSha256: "b".repeat(64), coverageSha256: null, readBy: "both" as const },
    ...{ changedBytes: 6, changedCharacteristics: 1, touched: [], approval: null, secondLead: null },
  };

  it("prints what was touched, and the document or the second lead it was released by", () => {
    const approval = { document: "Report 17/2030", issuer: "Test house North" };
    const secondLead = { name: "Ira Vale", at: "2030-01-02T03:04:05.000Z", reason: "looked through" };
    const shown = { ...record, uncoveredBytes: 0, touched: [LIMITER] };
    const { rerender } = render(<RecordCalibration calibration={{ ...shown, approval }} />);
    expect(screen.getByRole("listitem").textContent).toBe("limiter, safety-relevant: rpm_limit");
    expect(screen.getByText(/Report 17\/2030.*Test house North/)).toBeTruthy();
    expect(screen.queryByText("Second lead")).toBeNull();
    rerender(<RecordCalibration calibration={{ ...shown, secondLead }} />);
    expect(screen.getByText(/Ira Vale.*2030-01-02 03:04 UTC.*looked through/)).toBeTruthy();
    expect(screen.queryByText("Approval document")).toBeNull();
  });

  it("says that nothing marked is touched only where every changed byte is described", () => {
    const { rerender } = render(<RecordCalibration calibration={{ ...record, uncoveredBytes: 0 }} />);
    expect(screen.getByText("nothing touched")).toBeTruthy();
    for (const unknown of [{ uncoveredBytes: 2 }, { uncoveredBytes: 0, readBy: "none" as const }]) {
      rerender(<RecordCalibration calibration={{ ...record, ...unknown }} />);
      expect(screen.queryByText("nothing touched")).toBeNull();
      expect(screen.getByText(/what no description covers can't be told/)).toBeTruthy();
    }
  });
});
