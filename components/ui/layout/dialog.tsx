"use client";

import { X } from "lucide-react";
import { Dialog as Primitive } from "radix-ui";
import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface DialogProps {
  /** The button that opens it. Leave out when `open` is controlled from outside. */
  trigger?: ReactNode;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
  title: ReactNode;
  description?: ReactNode;
  children: ReactNode;
  /** Buttons at the end. Wrap the one that only closes in `DialogClose`. */
  footer?: ReactNode;
  width?: "narrow" | "wide";
}

/**
 * A question that needs an answer before going on. Focus is kept inside, Escape closes, focus returns to the trigger.
 * The shade is ours: the library's own overlay adds a style element that the content policy refuses.
 */
export function Dialog({
  trigger,
  open,
  onOpenChange,
  title,
  description,
  children,
  footer,
  width = "narrow",
}: DialogProps) {
  const withoutDescription = description ? {} : { "aria-describedby": undefined };
  return (
    <Primitive.Root open={open} onOpenChange={onOpenChange}>
      {trigger && <Primitive.Trigger asChild>{trigger}</Primitive.Trigger>}
      <Primitive.Portal>
        <div className="dialog-shade fixed inset-0 z-40 flex items-end justify-center overflow-y-auto sm:items-center sm:p-6">
          <Primitive.Content
            {...withoutDescription}
            className={cn(
              "relative max-h-dvh w-full overflow-y-auto rounded border border-edge bg-surface p-5 text-ink sm:max-h-[calc(100dvh-3rem)] sm:p-6",
              width === "narrow" ? "max-w-lg" : "max-w-3xl",
            )}
          >
            <Primitive.Title className="pr-12 text-20">{title}</Primitive.Title>
            {description && (
              <Primitive.Description className="mt-1 text-15 text-ink2">{description}</Primitive.Description>
            )}
            <div className="mt-4">{children}</div>
            {footer && <div className="mt-6 flex flex-wrap gap-2">{footer}</div>}
            <Primitive.Close
              aria-label="Close"
              className="absolute top-3 right-3 inline-flex size-11 items-center justify-center rounded text-ink2 hover:bg-sunk hover:text-ink"
            >
              <X aria-hidden size={20} />
            </Primitive.Close>
          </Primitive.Content>
        </div>
      </Primitive.Portal>
    </Primitive.Root>
  );
}

/** Wraps the button inside a dialog that closes it without doing anything else. */
export function DialogClose({ children }: { children: ReactNode }) {
  return <Primitive.Close asChild>{children}</Primitive.Close>;
}
