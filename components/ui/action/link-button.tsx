import Link from "next/link";
import type { ComponentProps, ReactNode } from "react";
import { type ButtonLook, type ButtonSize, buttonStyle } from "@/components/ui/action/button-style";

export interface LinkButtonProps extends ComponentProps<typeof Link> {
  look?: ButtonLook;
  size?: ButtonSize;
  icon?: ReactNode;
}

/** A link with the look of a button: it goes somewhere, it changes nothing. */
export function LinkButton({
  look = "outlined",
  size = "normal",
  icon,
  className,
  children,
  ...rest
}: LinkButtonProps) {
  return (
    <Link {...rest} className={buttonStyle(look, size, false, className)}>
      {icon && (
        <span aria-hidden className="shrink-0 [&>svg]:size-[1.2em]">
          {icon}
        </span>
      )}
      {children}
    </Link>
  );
}
