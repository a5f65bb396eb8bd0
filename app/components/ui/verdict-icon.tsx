/**
 * The verdicts' shapes, told apart without colour: tick in a disc (pass), cross in an octagon (fail), a balance in a
 * diamond (undecided), a question mark in a broken ring (unknown), a bar in a square (not applicable), a struck
 * ring (not possible). `<VerdictIcon verdict="pass" size={16} />`
 */
import type { SVGProps } from "react";

export type Verdict = "pass" | "fail" | "undecided" | "unknown" | "not-applicable" | "not-possible";

export function VerdictIcon({
  verdict,
  size = 18,
  ...rest
}: { verdict: Verdict; size?: number | string } & SVGProps<SVGSVGElement>) {
  return (
    <svg
      width={size}
      height={size}
      viewBox="0 0 24 24"
      fill="none"
      stroke="currentColor"
      strokeWidth="2.2"
      strokeLinecap="round"
      strokeLinejoin="round"
      aria-hidden
      {...rest}
    >
      <VerdictShape verdict={verdict} />
    </svg>
  );
}

/** The bare shape in a 24 × 24 box, for use inside a larger drawing. */
export function VerdictShape({ verdict }: { verdict: Verdict }) {
  switch (verdict) {
    case "pass":
      return (
        <>
          <circle cx="12" cy="12" r="10" fill="currentColor" stroke="none" />
          <path d="m7 12.5 3.5 3.5L17.5 8.5" className="stroke-sheet print:stroke-white" strokeWidth="2.6" />
        </>
      );
    case "fail":
      return (
        <>
          <path d="M8 2h8l6 6v8l-6 6H8l-6-6V8z" fill="currentColor" stroke="none" />
          <path d="m8.5 8.5 7 7m0-7-7 7" className="stroke-sheet print:stroke-white" strokeWidth="2.6" />
        </>
      );
    case "undecided":
      return (
        <>
          <path d="M12 1.5 22.5 12 12 22.5 1.5 12z" />
          <path
            d="M8 10.5c1.3-1.5 2.7-1.5 4 0s2.7 1.5 4 0M8 14.5c1.3-1.5 2.7-1.5 4 0s2.7 1.5 4 0"
            strokeWidth="1.8"
          />
        </>
      );
    case "unknown":
      return (
        <>
          <circle cx="12" cy="12" r="10" strokeDasharray="4.2 3.7" />
          <path d="M9.4 9.3a2.7 2.7 0 1 1 3.9 2.5c-.9.5-1.3 1-1.3 2" />
          <path d="M12 17.1v.1" strokeWidth="2.6" />
        </>
      );
    case "not-applicable":
      return (
        <>
          <rect x="3" y="3" width="18" height="18" rx="1" />
          <path d="M8 12h8" />
        </>
      );
    case "not-possible":
      return (
        <>
          <circle cx="12" cy="12" r="9.5" />
          <path d="m5.4 5.4 13.2 13.2" />
        </>
      );
  }
}
