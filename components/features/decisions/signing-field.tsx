import Link from "next/link";
import type { UseFormRegisterReturn } from "react-hook-form";
import { TextInput } from "@/components/ui/form/text-input";
import { Notice } from "@/components/ui/status/notice";

export interface SigningFieldProps {
  hasPassphrase: boolean;
  error: string | undefined;
  field: UseFormRegisterReturn;
}

/** Where a decision is signed; who has no passphrase yet is told where to set one. */
export function SigningField({ hasPassphrase, error, field }: SigningFieldProps) {
  if (hasPassphrase) {
    return (
      <TextInput
        label="Your signing passphrase"
        type="password"
        autoComplete="current-password"
        required
        error={error}
        {...field}
      />
    );
  }
  return (
    <Notice tone="caution">
      You sign with a passphrase, and you have none yet.{" "}
      <Link href="/account" className="link">
        Set one on your account page
      </Link>
      .
    </Notice>
  );
}
