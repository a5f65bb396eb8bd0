/**
 * A boxed warning, with the general warning sign or the one for dangerous voltage (shapes after ISO 7010 W001, W012).
 *   <Caution>Discharge the capacitors before you touch the plug pins.</Caution>
 *   <Caution sign="voltage" title="Before this step" items={check.cautions} />
 */
import { useId, type ReactNode } from "react";

export interface CautionProps {
  sign?: "general" | "voltage";
  title?: string;
  /** Several cautions as a list; `children` is for one. */
  items?: readonly string[];
  size?: "md" | "bench";
  className?: string;
  children?: ReactNode;
}

export function Caution({
  sign = "general",
  title = "Caution",
  items,
  size = "md",
  className = "",
  children,
}: CautionProps) {
  const id = useId();
  const bench = size === "bench";
  return (
    <div
      role="note"
      aria-labelledby={id}
      className={`flex items-start gap-4 border-2 border-caution-edge bg-caution-wash px-4 py-3 ${bench ? "text-lg" : ""} ${className}`}
    >
      <WarningSign sign={sign} size={bench ? 52 : 36} />
      <div className="min-w-0">
        <p id={id} className="font-bold">
          {title}
        </p>
        {items && items.length > 0 ? (
          <ul className={items.length > 1 ? "list-disc space-y-1 pl-5" : ""}>
            {items.map((item) => (
              <li key={item}>{item}</li>
            ))}
          </ul>
        ) : null}
        {children}
      </div>
    </div>
  );
}

/** The triangle on its own, yellow with a black border in every theme. */
export function WarningSign({ sign, size = 36 }: { sign: "general" | "voltage"; size?: number }) {
  return (
    <svg aria-hidden width={size} height={size * 0.9} viewBox="0 0 40 36" className="shrink-0">
      <path
        d="M20 3 37 33H3z"
        className="fill-sign-yellow stroke-sign-black"
        strokeWidth="3.4"
        strokeLinejoin="round"
      />
      {sign === "voltage" ? (
        <path
          d="m22.6 10.5-7.2 10.6h4l-2 4.6-1.5-.7.6 4.9 4-2.9-1.5-.7 4.6-8.3h-4.3z"
          className="fill-sign-black"
        />
      ) : (
        <>
          <path d="M20 12.5v10" className="stroke-sign-black" strokeWidth="3.6" strokeLinecap="round" />
          <circle cx="20" cy="27.8" r="2.1" className="fill-sign-black" />
        </>
      )}
    </svg>
  );
}
