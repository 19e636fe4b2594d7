import type { ReactNode } from "react";
import { classNames } from "@/app/_ui/classNames";

export interface AskedProps {
  /** What the number is, for those who listen: "the slope, 0.161(7)". */
  readonly label: string;
  readonly children: ReactNode;
  readonly className?: string;
  onAsk(): void;
}

/** A number that can be asked where it comes from, by a click or with Enter. */
export function Asked({ label, children, className, onAsk }: AskedProps) {
  return (
    <button
      type="button"
      aria-label={`Trace ${label}`}
      className={classNames("border-b border-transparent hover:border-indigo hover:text-indigo focus-visible:border-indigo", className)}
      onClick={onAsk}
    >
      {children}
    </button>
  );
}
