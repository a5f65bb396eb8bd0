/** Why a unit was sent back, in the words of whoever did. */
export function SentBackNote({
  sentBack,
  revision,
}: {
  sentBack: { reason: string; by: string };
  /** The revision that was opened by it. */
  revision: number;
}) {
  return (
    <section
      aria-label={`Why revision ${revision - 1} was sent back`}
      className="border-l-4 border-defect bg-defect-wash px-4 py-3"
    >
      <p className="font-semibold">
        {sentBack.by} sent revision {revision - 1} back:
      </p>
      <p className="whitespace-pre-wrap">{sentBack.reason}</p>
    </section>
  );
}
