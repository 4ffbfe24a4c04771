import { expect, test } from "vitest";
import { downloadText } from "@/lib/http/download";

test("a text in pieces arrives whole, as a download that no browser renders", async () => {
  const pieces = ["name,value\r\n", "Zündung,−3 °\r\n"];
  const response = downloadText({ fileName: "R1 to R2.csv", type: "text/csv", pieces });
  expect(await response.text()).toBe(pieces.join(""));
  expect(response.headers.get("content-type")).toBe("text/csv; charset=utf-8");
  expect(response.headers.get("content-disposition")).toMatch(/^attachment; filename="R1_to_R2\.csv"/);
  expect(response.headers.get("x-content-type-options")).toBe("nosniff");
  expect(response.headers.get("content-security-policy")).toBe("sandbox");
});
