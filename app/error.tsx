"use client";

import { Failure, type FailureProps } from "@/components/features/shell/failure";

export default function PageError(props: FailureProps) {
  return <Failure {...props} />;
}
