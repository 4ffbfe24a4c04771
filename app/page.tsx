import { redirect } from "next/navigation";

/** The start: the list of programmes, which sends a stranger to sign in. */
export default function StartPage() {
  redirect("/programmes");
}
