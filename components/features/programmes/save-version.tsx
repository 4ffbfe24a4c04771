"use client";

import { useState } from "react";
import { Button } from "@/components/ui/action/button";
import { Notice } from "@/components/ui/status/notice";
import { showToast } from "@/components/ui/status/toast";

/** What an action that adds a version answers. */
export interface VersionAnswer {
  ok: boolean;
  message?: string;
  value?: { version: number };
}

/** Sends a new version and says what came of it. */
export function useSaveVersion(version: number) {
  const [problem, setProblem] = useState<string | null>(null);
  const [isSaving, setSaving] = useState(false);
  const save = async (send: () => Promise<VersionAnswer>) => {
    setProblem(null);
    setSaving(true);
    const state = await send();
    setSaving(false);
    const saved = state.value?.version;
    if (!state.ok) setProblem(state.message ?? "It was not saved. Try again.");
    else
      showToast(
        saved === version ? "Nothing was changed, so no version was added." : `Version ${saved} is saved.`,
      );
  };
  return { save, problem, isSaving };
}

export interface SaveVersionProps {
  version: number;
  problem: string | null;
  isSaving: boolean;
  blockedBecause: string | null;
}

/** The button at the end of such a form, and the sentence when it was refused. */
export function SaveVersion({ version, problem, isSaving, blockedBecause }: SaveVersionProps) {
  return (
    <div className="flex flex-col items-start gap-4">
      {problem && (
        <Notice tone="problem" live>
          {problem}
        </Notice>
      )}
      <Button type="submit" look="filled" blockedBecause={blockedBecause} disabled={isSaving}>
        {isSaving ? "Saving …" : `Save as version ${version + 1}`}
      </Button>
    </div>
  );
}
