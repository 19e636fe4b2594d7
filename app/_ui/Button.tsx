import type { ButtonHTMLAttributes, Ref } from "react";
import { classNames } from "./classNames";

/**
 * `act`: words in indigo, the usual action. `main`: the one action of a screen or dialog, underlined. `quiet`: in second ink,
 * for what is seldom needed. `danger`: what takes something away.
 */
export type ButtonLook = "act" | "main" | "quiet" | "danger" | "plain";

export interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  readonly look?: ButtonLook;
  readonly ref?: Ref<HTMLButtonElement>;
}

const looks: Record<ButtonLook, string> = {
  act: "text-indigo font-medium hover:underline",
  main: "text-indigo font-semibold border-b-2 border-indigo leading-[22px] disabled:border-axis",
  quiet: "text-second hover:text-ink",
  danger: "text-vermilion font-medium hover:underline",
  plain: "text-ink",
};

/** A button is words, never a box; what it does is said by the words. */
export function Button({ look = "act", type = "button", className, ref, ...rest }: ButtonProps) {
  return (
    <button
      ref={ref}
      type={type}
      className={classNames(
        "inline-flex items-baseline gap-1.5 text-left [&>svg]:self-center disabled:text-second disabled:no-underline",
        looks[look],
        className,
      )}
      {...rest}
    />
  );
}
