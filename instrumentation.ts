/** Run once when the web process starts. A failed check ends it: nothing may be acknowledged that could be lost. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== "nodejs") return;
  const { checkBeforeServing } = await import("@/lib/start-checks");
  try {
    await checkBeforeServing();
  } catch (error) {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  }
}
