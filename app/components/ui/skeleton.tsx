/** Grey lines where text is on its way. Say in words elsewhere what is loading. `<Skeleton lines={3} />` */
export function Skeleton({ lines = 3 }: { lines?: number }) {
  return (
    <div aria-hidden className="skeleton-pulse space-y-2.5">
      {Array.from({ length: lines }, (_, index) => (
        <div key={index} className={`h-3.5 rounded-sm bg-rule ${index === lines - 1 ? "w-3/5" : "w-full"}`} />
      ))}
    </div>
  );
}
