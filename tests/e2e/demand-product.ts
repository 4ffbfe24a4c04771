/** Stops a run that has nothing to test: the product, its database and its folders are made by `npm test`. */
export default function demandProduct(): void {
  if (!process.env.E2E_BASE_URL) {
    throw new Error("The browser tests need the product they test: run them with npm test -- e2e");
  }
}
