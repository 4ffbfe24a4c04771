import type { Metadata, Route } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { requestLinkAction, signInAsSampleAction } from "@/app/(account)/sign-in/actions";
import { SamplePeople } from "@/components/features/sign-in/sample-people";
import { SignInForm } from "@/components/features/sign-in/sign-in-form";
import { WhatItIs } from "@/components/features/sign-in/what-it-is";
import { Card } from "@/components/ui/layout/card";
import { currentPerson } from "@/lib/auth/current";
import { ownPath } from "@/lib/auth/own-path";
import { listSamplePeople } from "@/lib/auth/sample-people";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage({ searchParams }: PageProps<"/sign-in">) {
  const next = ownPath((await searchParams).next);
  if (await currentPerson()) redirect(next as Route);
  const people = await listSamplePeople();
  return (
    <div className="grid gap-x-16 gap-y-10 py-4 md:py-10 lg:grid-cols-[minmax(0,1fr)_24rem]">
      <WhatItIs />
      <div className="flex flex-col gap-6">
        {people.length > 0 && (
          <Card
            title="Look around as"
            description="A demo workshop with sample data. One click signs you in, without an address."
          >
            <SamplePeople
              people={people.map((person) => ({ ...person, name: person.name ?? "" }))}
              next={next}
              action={signInAsSampleAction}
            />
            <p className="mt-4 text-15">
              New here?{" "}
              <Link href="/demo" className="link">
                What to try, and files to try it with
              </Link>
            </p>
          </Card>
        )}
        <Card
          title="Sign in"
          description="No password: a link comes by mail. It works once, within ten minutes."
        >
          <SignInForm next={next} action={requestLinkAction} />
        </Card>
      </div>
    </div>
  );
}
