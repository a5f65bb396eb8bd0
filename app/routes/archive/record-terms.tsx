import type { ReactNode } from "react";
import { Caution } from "~/components/ui/caution";
import { Sheet } from "~/components/ui/sheet";
import { Day, Time } from "~/components/ui/time";
import type { UnitRecord } from "~/services/records/record-format";
import { nameMatches } from "~/services/signing/signing-rules";
import type { Validity } from "~/workflow/states";
import { ValidityBanner } from "./validity-banner";

/** How the record stands today, what was stated and by whom. */
export function RecordTerms({
  validity,
  decision,
  failed,
  children,
}: {
  validity: Validity;
  decision: UnitRecord["decision"];
  failed: readonly string[];
  /** Between how it stands and what was stated: a withdrawal. */
  children?: ReactNode;
}) {
  const { signer } = decision;
  return (
    <>
      <ValidityBanner validity={validity} departures={failed.length > 0}>
        {"recheckOn" in validity ? (
          <p className="mt-1 text-sm">
            Recheck by <Day on={validity.recheckOn} />.
          </p>
        ) : null}
      </ValidityBanner>
      {children}
      {decision.kind === "signed" && failed.length > 0 ? (
        <Caution title="Signed although checks fail" items={failed}>
          <p className="mt-2 whitespace-pre-line">
            <span className="font-semibold">The signer’s reasons: </span>
            {decision.departures}
          </p>
        </Caution>
      ) : null}
      <Sheet title={decision.kind === "signed" ? "Signed" : "Refused"}>
        <p className="max-w-prose whitespace-pre-line">{decision.statement}</p>
        <p className="mt-3 font-medium">
          {signer.licence.holder}, <Time at={decision.at} />
          {nameMatches(signer.name, signer.licence.holder) ? null : (
            <span className="font-normal text-ink-soft"> (signed in as {signer.name})</span>
          )}
        </p>
        <p className="text-sm text-ink-soft">
          Licence {signer.licence.number} of {signer.licence.holder}, {signer.licence.authority}, valid{" "}
          <Day on={signer.licence.validFrom} /> to <Day on={signer.licence.validTo} />, up to{" "}
          {signer.licence.maxSupplyVolts} V,{" "}
          {signer.licence.coversBatteries ? "batteries included" : "no batteries"}. Signature{" "}
          {decision.signature.method === "drawn" ? "drawn" : "typed"} in the act.
        </p>
      </Sheet>
    </>
  );
}
