import "server-only";
import { cookies } from "next/headers";
import { DAYLIGHT_COOKIE, isTheme, THEME_COOKIE, type Theme } from "@/components/features/shell/appearance";

/** The looks chosen on this device; `system` and off when nothing valid is kept. For server components. */
export async function readAppearance(): Promise<{ theme: Theme; daylight: boolean }> {
  const jar = await cookies();
  const theme = jar.get(THEME_COOKIE)?.value;
  return { theme: isTheme(theme) ? theme : "system", daylight: jar.get(DAYLIGHT_COOKIE)?.value === "on" };
}
