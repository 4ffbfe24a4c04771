"use client";

import { useState } from "react";
import {
  ChannelKeyForm,
  type ChannelKeyFormProps,
} from "@/components/features/channel-keys/channel-key-form";
import { KeyVersions, type KeyVersionsProps } from "@/components/features/channel-keys/key-versions";
import { Notice } from "@/components/ui/status/notice";

export interface ChannelKeyWorkProps {
  form: Omit<ChannelKeyFormProps, "onDone">;
  versions: Omit<KeyVersionsProps, "onDone">;
}

/** Saved keys and the columns below them; what was done last stays in sight when both are drawn anew. */
export function ChannelKeyWork({ form, versions }: ChannelKeyWorkProps) {
  const [done, setDone] = useState<string | null>(null);
  return (
    <>
      {done && (
        <Notice
          live
          actions={
            <a className="link" href={`/runs/${form.runId}`}>
              Look at the run
            </a>
          }
        >
          {done}
        </Notice>
      )}
      {versions.versions.length > 0 && <KeyVersions {...versions} onDone={setDone} />}
      <ChannelKeyForm key={versions.used?.id ?? "none"} {...form} onDone={setDone} />
    </>
  );
}
