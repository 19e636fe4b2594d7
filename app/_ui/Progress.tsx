import { Button } from "./Button";

export interface ProgressProps {
  /** What is under way: "Sending kestrel-law.csv". */
  readonly label: string;
  /** 0 to 1; null while the end is not known. */
  readonly done: number | null;
  readonly onStop?: (() => void) | undefined;
}

/** Progress of long work, as a hairline that fills, with a way to stop it. */
export function Progress({ label, done, onStop }: ProgressProps) {
  return (
    <div className="py-2">
      <div className="flex justify-between gap-4 text-margin text-second">
        <span>{label}</span>
        <span className="font-mono">{done === null ? "" : `${Math.floor(done * 100)} %`}</span>
      </div>
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={100}
        {...(done === null ? {} : { "aria-valuenow": Math.floor(done * 100) })}
        className="mt-1 h-1 border-b border-axis"
      >
        <div className="h-1 bg-indigo" style={{ width: `${(done ?? 0.08) * 100}%` }} />
      </div>
      {onStop ? (
        <Button className="mt-2 text-margin" onClick={onStop}>
          Stop
        </Button>
      ) : null}
    </div>
  );
}
