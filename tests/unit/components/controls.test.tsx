import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, describe, expect, it, vi } from "vitest";
import { Button } from "@/components/ui/action/button";
import { Menu } from "@/components/ui/action/menu";
import { Checkbox } from "@/components/ui/form/checkbox";
import { NumberInput } from "@/components/ui/form/number-input";
import { RadioCards } from "@/components/ui/form/radio-cards";
import { Select } from "@/components/ui/form/select";
import { TextInput } from "@/components/ui/form/text-input";
import { Textarea } from "@/components/ui/form/textarea";
import { Dialog, DialogClose } from "@/components/ui/layout/dialog";
import { Tabs } from "@/components/ui/layout/tabs";
import { cn } from "@/lib/cn";

afterEach(cleanup);

const describedText = (element: Element) =>
  (element.getAttribute("aria-describedby") ?? "")
    .split(" ")
    .map((id) => document.getElementById(id)?.textContent)
    .join(" | ");

describe("cn", () => {
  it("lets the later of two sizes win and keeps a colour beside it", () => {
    expect(cn("text-13 text-ink2", "text-17")).toBe("text-ink2 text-17");
    expect(cn("p-4", false, "p-2")).toBe("p-2");
  });
});

describe("Button", () => {
  it("never sends a form by accident", () => {
    render(<Button>Open</Button>);
    expect(screen.getByRole("button").getAttribute("type")).toBe("button");
  });

  it("stays reachable but does nothing while it is blocked, and says why", () => {
    const press = vi.fn();
    render(
      <Button type="submit" onClick={press} blockedBecause="2 of 3 return passes: attach one more.">
        Ask for a decision
      </Button>,
    );
    const button = screen.getByRole("button", { name: "Ask for a decision" });
    fireEvent.click(button);
    expect(press).not.toHaveBeenCalled();
    expect(button.getAttribute("aria-disabled")).toBe("true");
    expect(button.getAttribute("type")).toBe("button");
    expect(button.hasAttribute("disabled")).toBe(false);
    expect(describedText(button)).toBe("2 of 3 return passes: attach one more.");
  });
});

describe("fields", () => {
  it("tie label, hint and error to every kind of control", () => {
    const texts = { label: "Strip", hint: "Where it was driven.", error: "Choose one.", required: true };
    render(
      <>
        <TextInput {...texts} name="a" />
        <NumberInput {...texts} name="b" />
        <Select {...texts} name="c" options={[{ value: "n", label: "N" }]} />
        <Textarea {...texts} name="d" />
      </>,
    );
    const controls = screen.getAllByLabelText(/^Strip/);
    expect(controls.map((control) => control.tagName)).toEqual(["INPUT", "INPUT", "SELECT", "TEXTAREA"]);
    for (const control of controls) {
      expect(describedText(control)).toBe("Choose one. | Where it was driven.");
      expect(control.getAttribute("aria-invalid")).toBe("true");
      expect(control.hasAttribute("required")).toBe(true);
    }
  });

  it("leave the attributes out where there is neither hint nor error", () => {
    render(<TextInput label="Name" />);
    const control = screen.getByLabelText("Name");
    expect(control.hasAttribute("aria-describedby")).toBe(false);
    expect(control.hasAttribute("aria-invalid")).toBe(false);
  });

  it("read the unit of a number with its label and accept a comma", () => {
    render(<NumberInput label="Test mass" unit="kg" defaultValue="1486,5" />);
    const control = screen.getByLabelText("Test mass, in kg");
    expect((control as HTMLInputElement).value).toBe("1486,5");
    expect(control.getAttribute("inputmode")).toBe("decimal");
  });

  it("tick a box by its words", () => {
    render(<Checkbox label="Full load was cleared" />);
    fireEvent.click(screen.getByText("Full load was cleared"));
    expect(screen.getByRole<HTMLInputElement>("checkbox").checked).toBe(true);
  });

  it("print on a radio card why it can't be chosen", () => {
    render(
      <RadioCards
        name="decision"
        legend="Decision"
        options={[
          { value: "hold", label: "Hold for more runs" },
          { value: "promote", label: "Promote", blockedBecause: "You are its author." },
        ]}
      />,
    );
    expect(screen.getByRole<HTMLInputElement>("radio", { name: /Promote/ }).disabled).toBe(true);
    expect(screen.getByText("You are its author.")).toBeDefined();
    fireEvent.click(screen.getByText("Hold for more runs"));
    expect(screen.getByRole<HTMLInputElement>("radio", { name: /Hold/ }).checked).toBe(true);
  });
});

describe("Tabs", () => {
  const tabs = ["Maps", "Curves", "Values"].map((label) => ({ id: label, label, content: `${label} here` }));

  it("show one panel and move with the arrows, round the ends", () => {
    render(<Tabs label="Change set" tabs={tabs} />);
    const shown = () => screen.getByRole("tabpanel").textContent;
    expect(shown()).toBe("Maps here");
    fireEvent.keyDown(screen.getByRole("tablist"), { key: "ArrowLeft" });
    expect(shown()).toBe("Values here");
    expect(document.activeElement?.textContent).toBe("Values");
    fireEvent.keyDown(screen.getByRole("tablist"), { key: "Home" });
    expect(shown()).toBe("Maps here");
  });

  it("carry no style attribute in the server's text", () => {
    expect(renderToStaticMarkup(<Tabs label="Change set" tabs={tabs} />)).not.toMatch(/\sstyle=/);
  });
});

describe("Menu", () => {
  it("closes with Escape and by a press outside", () => {
    render(
      <>
        <Menu label="Mia">
          <button type="button">Sign out</button>
        </Menu>
        <p>outside</p>
      </>,
    );
    const details = screen.getByText("Mia").closest("details");
    if (!details) throw new Error("no menu");
    details.open = true;
    fireEvent.pointerDown(screen.getByText("Sign out"));
    expect(details.open).toBe(true);
    fireEvent.pointerDown(screen.getByText("outside"));
    expect(details.open).toBe(false);
    details.open = true;
    fireEvent.keyDown(screen.getByText("Sign out"), { key: "Escape" });
    expect(details.open).toBe(false);
    expect(document.activeElement?.tagName).toBe("SUMMARY");
  });
});

describe("Dialog", () => {
  it("opens with a name, closes by its buttons, and adds no style element", () => {
    const before = document.querySelectorAll("style").length;
    render(
      <Dialog
        trigger={<Button>Roll back …</Button>}
        title="Roll back to R12"
        footer={
          <DialogClose>
            <Button>Leave it</Button>
          </DialogClose>
        }
      >
        <p>R12 stood until 12 Nov.</p>
      </Dialog>,
    );
    fireEvent.click(screen.getByRole("button", { name: "Roll back …" }));
    expect(screen.getByRole("dialog", { name: "Roll back to R12" })).toBeDefined();
    expect(document.querySelectorAll("style").length).toBe(before);
    fireEvent.click(screen.getByRole("button", { name: "Leave it" }));
    expect(screen.queryByRole("dialog")).toBeNull();
  });
});
