import { type ComponentProps, type ReactNode, useId } from "react";
import { type ButtonLook, type ButtonSize, buttonStyle } from "@/components/ui/action/button-style";

export interface ButtonProps extends ComponentProps<"button"> {
  /** One filled button a view. Default: outlined. */
  look?: ButtonLook;
  size?: ButtonSize;
  /** An icon before the words; it is hidden from assistive technology. */
  icon?: ReactNode;
  /** Why it can't be pressed now. The button stays reachable, does nothing, and the sentence stands below it. */
  blockedBecause?: string | null;
}

/** A button. `type` is "button" unless said otherwise, so that a form is never sent by accident. */
export function Button({
  look = "outlined",
  size = "normal",
  icon,
  blockedBecause,
  className,
  children,
  type = "button",
  onClick,
  ...rest
}: ButtonProps) {
  const reasonId = useId();
  const face = (
    <>
      {icon && (
        <span aria-hidden className="shrink-0 [&>svg]:size-[1.2em]">
          {icon}
        </span>
      )}
      {children}
    </>
  );
  if (!blockedBecause) {
    return (
      <button {...rest} type={type} onClick={onClick} className={buttonStyle(look, size, false, className)}>
        {face}
      </button>
    );
  }
  return (
    <span className="inline-flex max-w-full flex-col items-start gap-1">
      <button
        {...rest}
        type="button"
        aria-disabled
        aria-describedby={reasonId}
        className={buttonStyle(look, size, true, className)}
      >
        {face}
      </button>
      <span id={reasonId} className="text-13 text-ink2">
        {blockedBecause}
      </span>
    </span>
  );
}
