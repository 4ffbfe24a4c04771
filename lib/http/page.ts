import "server-only";
import { forbidden, notFound } from "next/navigation";
import { z } from "zod";
import { ForbiddenError, NotFoundError } from "@/lib/errors";

/**
 * Loads what a page is about. What does not exist ends on the "not found" page (404), what the policy refuses on the
 * "not for you" page (403); both before anything was sent.
 */
export async function orRefused<T>(load: () => Promise<T>): Promise<T> {
  try {
    return await load();
  } catch (error) {
    if (error instanceof NotFoundError) notFound();
    if (error instanceof ForbiddenError) forbidden();
    throw error;
  }
}

/**
 * As orRefused, by the id in the page's address. What does not exist, belongs to another workspace or is no id at all
 * ends on the same "not found" page.
 */
export async function orNotFound<T>(id: unknown, load: (id: string) => Promise<T>): Promise<T> {
  const parsed = z.uuid().safeParse(id);
  if (!parsed.success) notFound();
  return await orRefused(() => load(parsed.data));
}

/** A version number of a page's address; undefined when none is asked for. What is no number ends on "not found". */
export function versionOf(text: string | string[] | undefined): number | undefined {
  if (text === undefined) return undefined;
  const parsed = z.coerce.number().int().min(1).max(1_000_000).safeParse(text);
  if (!parsed.success) notFound();
  return parsed.data;
}
