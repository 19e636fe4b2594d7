import type { ReactNode } from "react";
import { Button, type ButtonProps } from "./Button";
import { classNames } from "./classNames";

export interface IconButtonProps extends Omit<ButtonProps, "children" | "aria-label"> {
  /** What a screen reader and the tooltip of the browser say. */
  readonly label: string;
  readonly children: ReactNode;
}

/** A button with a drawing in place of words, at least 24 × 24 for fingers and WCAG 2.5.8. */
export function IconButton({ label, children, className, ...rest }: IconButtonProps) {
  return (
    <Button aria-label={label} title={label} className={classNames("min-h-6 min-w-6 justify-center", className)} {...rest}>
      {children}
    </Button>
  );
}
