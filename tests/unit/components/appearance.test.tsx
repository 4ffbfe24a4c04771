import { act, cleanup, fireEvent, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { isTheme } from "@/components/features/shell/appearance";
import { DaylightSwitch } from "@/components/features/shell/daylight-switch";
import { ThemeSwitch } from "@/components/features/shell/theme-switch";
import { showToast, ToastRegion } from "@/components/ui/status/toast";

afterEach(() => {
  cleanup();
  delete document.documentElement.dataset.theme;
  delete document.documentElement.dataset.daylight;
});

describe("ThemeSwitch", () => {
  it("takes effect at once and is kept in a cookie for the server", () => {
    render(<ThemeSwitch initial="system" />);
    fireEvent.click(screen.getByLabelText("Dark"));
    expect(document.documentElement.dataset.theme).toBe("dark");
    expect(document.cookie).toContain("twinpass-theme=dark");
  });

  it("knows no other themes", () => {
    expect(["system", "light", "dark"].every(isTheme)).toBe(true);
    expect(isTheme('dark" onload="')).toBe(false);
    expect(isTheme(undefined)).toBe(false);
  });
});

describe("DaylightSwitch", () => {
  it("switches the pages to ink only and back", () => {
    render(<DaylightSwitch initial={false} />);
    const button = screen.getByRole("switch", { name: "Daylight" });
    fireEvent.click(button);
    expect(button.getAttribute("aria-checked")).toBe("true");
    expect(document.documentElement.dataset.daylight).toBe("on");
    fireEvent.click(button);
    expect(document.documentElement.dataset.daylight).toBeUndefined();
    expect(document.cookie).toContain("twinpass-daylight=off");
  });
});

describe("toasts", () => {
  it("appear in a polite region, at most three, and can be undone", () => {
    let undone = 0;
    render(<ToastRegion />);
    act(() => {
      for (const text of ["one", "two", "three"]) showToast(text);
      showToast("Run set aside.", { label: "Bring back", run: () => (undone += 1) });
    });
    expect(screen.queryByText("one")).toBeNull();
    expect(screen.getByRole("status").textContent).toContain("Run set aside.");
    fireEvent.click(screen.getByRole("button", { name: "Bring back" }));
    expect(undone).toBe(1);
    expect(screen.queryByText("Run set aside.")).toBeNull();
  });
});
