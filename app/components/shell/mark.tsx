/**
 * The mark of Mainsgate: a gate of two posts and a lintel, with a line that is parted in it, as on a wiring drawing.
 *   <Mark size={28} />   <Wordmark />
 */
export function Mark({ size = 28 }: { size?: number }) {
  return (
    <svg aria-hidden width={size} height={size} viewBox="0 0 32 32" fill="none" className="shrink-0">
      <path d="M5 29V5h22v24" stroke="currentColor" strokeWidth="2.6" />
      <path d="M1.5 5h29" stroke="currentColor" strokeWidth="2.6" />
      <path d="M16 29v-6M16 9v3" className="stroke-copper" strokeWidth="2.6" />
      <path d="M16 23 22 14" className="stroke-copper" strokeWidth="2.6" strokeLinecap="round" />
      <circle cx="16" cy="23" r="2" className="fill-copper" />
      <circle cx="16" cy="12.2" r="2" className="fill-copper" />
    </svg>
  );
}

export function Wordmark() {
  return (
    <span className="inline-flex items-center gap-2 text-lg font-bold tracking-tight">
      <Mark />
      Mainsgate
    </span>
  );
}
