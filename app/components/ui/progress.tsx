/**
 * How far an upload or a job is. Without a value it only says that something is going on.
 *   <Progress label="Uploading plate.jpg" value={sent} max={total} detail="2.1 of 4.0 MB" />
 */
import { useId } from "react";

export interface ProgressProps {
  label: string;
  value?: number;
  max?: number;
  detail?: string;
}

export function Progress({ label, value, max = 1, detail }: ProgressProps) {
  const id = useId();
  const share =
    value === undefined || max <= 0 ? null : Math.min(100, Math.max(0, Math.round((value / max) * 100)));
  return (
    <div>
      <div className="flex justify-between gap-4 text-sm">
        <label htmlFor={id} className="min-w-0 truncate">
          {label}
        </label>
        <span className="shrink-0 text-ink-soft tabular-nums">
          {detail ?? (share === null ? "" : `${share} %`)}
        </span>
      </div>
      <progress
        id={id}
        className="meter-bar mt-1 h-3 w-full"
        {...(share === null ? {} : { value: share, max: 100 })}
      />
    </div>
  );
}
