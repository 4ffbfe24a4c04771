"use client";

import { useMutation } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useRef, useState } from "react";
import { DescriptionUploads, descriptionUploadIds } from "@/components/features/uploads/description-uploads";
import { isOnItsWay, useUploads } from "@/components/features/uploads/use-uploads";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";
import { callApi } from "@/lib/client/api";
import { QueryProvider } from "@/lib/client/query-provider";
import type { AddDescription } from "@/lib/services/descriptions/schema";

interface AddDescriptionFormProps {
  revisionId: string;
  rowVersion: number;
  label: string;
}

/** One key for one wish, so that a repeated press makes one description and another wish is another. */
function keyOf(keys: Map<string, string>, wish: string): string {
  const key = keys.get(wish) ?? crypto.randomUUID();
  keys.set(wish, key);
  return key;
}

/** Drops the files of a description and gives them to a revision. */
export function AddDescriptionForm(props: AddDescriptionFormProps) {
  return (
    <QueryProvider>
      <Form {...props} />
    </QueryProvider>
  );
}

function Form({ revisionId, rowVersion, label }: AddDescriptionFormProps) {
  const router = useRouter();
  const uploads = useUploads("description");
  const [mainId, setMainId] = useState<string | null>(null);
  const uploadIds = descriptionUploadIds(uploads.items, mainId);
  const keys = useRef(new Map<string, string>());
  const add = useMutation({
    mutationFn: () =>
      callApi(`/api/revisions/${revisionId}/description`, {
        method: "POST",
        json: { rowVersion, uploadIds } satisfies Omit<AddDescription, "revisionId">,
        idempotencyKey: keyOf(keys.current, `${rowVersion} ${uploadIds}`),
      }),
    onSuccess: async () => {
      for (const item of uploads.items) await uploads.attach(item, async () => "Part of the description.");
      router.refresh();
    },
  });
  const isSending = uploads.items.some(isOnItsWay);
  return (
    <div className="flex flex-col gap-4">
      <DescriptionUploads uploads={uploads} mainId={mainId} onMain={setMainId} />
      {add.error && (
        <Notice tone="problem" live>
          {add.error.message}
        </Notice>
      )}
      {uploadIds.length > 0 && !add.isSuccess && (
        <div>
          <Button
            look="filled"
            blockedBecause={isSending ? "A file is still on its way." : null}
            disabled={add.isPending}
            onClick={() => add.mutate()}
          >
            {add.isPending ? "Adding …" : label}
          </Button>
        </div>
      )}
    </div>
  );
}
