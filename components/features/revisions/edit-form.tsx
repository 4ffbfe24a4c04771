"use client";
import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { RevisionFields } from "@/components/features/revisions/revision-fields";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";
import { type RevisionFormValues, type RevisionText, revisionForm } from "@/lib/services/revisions/schema";

export interface EditRevisionFormProps {
  revisionId: string;
  rowVersion: number;
  text: RevisionText;
  action: (input: unknown) => Promise<{ ok: boolean; message?: string }>;
}

/** What a draft says of itself, until it is validated. */
export function EditRevisionForm({ revisionId, rowVersion, text, action }: EditRevisionFormProps) {
  const [answer, setAnswer] = useState<{ ok: boolean; message?: string } | null>(null);
  const answered = text.touchesEmissionOrSafety;
  const form = useForm<RevisionFormValues, unknown, RevisionText>({
    resolver: zodResolver(revisionForm),
    defaultValues: {
      title: text.title,
      note: text.note,
      changeReason: text.changeReason,
      intendedUse: text.intendedUse ?? "",
      touchesEmissionOrSafety: answered === null ? "" : answered ? "yes" : "no",
    },
  });
  const save = form.handleSubmit(async (values) =>
    setAnswer(await action({ ...values, revisionId, rowVersion })),
  );
  return (
    <form onSubmit={save} noValidate className="flex flex-col gap-5">
      <RevisionFields register={form.register} control={form.control} errors={form.formState.errors} />
      {answer && (
        <Notice tone={answer.ok ? "plain" : "problem"} live>
          {answer.ok ? "Saved." : answer.message}
        </Notice>
      )}
      <div>
        <Button type="submit" disabled={form.formState.isSubmitting}>
          Save the draft
        </Button>
      </div>
    </form>
  );
}
