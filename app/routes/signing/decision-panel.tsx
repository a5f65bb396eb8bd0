import { Link, useSearchParams } from "react-router";
import { Sheet } from "~/components/ui/sheet";
import { withParams } from "~/components/ui/table-params";
import type { FormRefusal } from "~/middleware/form-refusal.server";
import { type DecisionKind, decisionKinds } from "./decide.schema";
import { RefuseForm } from "./refuse-form";
import { SendBackForm } from "./send-back-form";
import { SignForm, type SignFormProps } from "./sign-form";

const words: Record<DecisionKind, string> = { sign: "Sign", refuse: "Refuse", "send-back": "Send back" };

export interface DecisionPanelProps extends Omit<SignFormProps, "result"> {
  kind: DecisionKind;
  result: (FormRefusal & { act: DecisionKind }) | undefined;
  /** Why the person can't decide at all; null when they can. */
  barred: string | null;
  /** What stands against a signature, and against a refusal: sentences. */
  againstSigning: readonly string[];
  againstRefusing: readonly string[];
}

/** Sign, refuse or send back: three forms, all kept while one is shown, so that nothing typed is lost between them. */
export function DecisionPanel(props: DecisionPanelProps) {
  const { kind, result, barred, againstSigning, againstRefusing, ...rest } = props;
  const { version, signer, reloadHref } = rest;
  const [search] = useSearchParams();
  const resultOf = (act: DecisionKind) => (result?.act === act ? result : undefined);
  return (
    <Sheet id="decide" title="Decide" className="scroll-mt-4 print:hidden">
      {barred !== null ? (
        <p className="font-medium">{barred}</p>
      ) : (
        <>
          <nav aria-label="Decision" className="mb-5 flex flex-wrap gap-2">
            {decisionKinds.map((one) => (
              <Link
                key={one}
                to={`${withParams(search, { decide: one === "sign" ? null : one })}#decide`}
                preventScrollReset
                replace
                aria-current={one === kind ? "true" : undefined}
                className="inline-flex min-h-11 items-center rounded-sm border border-rule-strong px-5 font-semibold hover:bg-inset aria-[current]:border-copper aria-[current]:bg-copper-wash aria-[current]:ring-1 aria-[current]:ring-copper"
              >
                {words[one]}
              </Link>
            ))}
          </nav>
          <div hidden={kind !== "sign"}>
            {againstSigning.length > 0 && !resultOf("sign") ? (
              <Barrier title="It can’t be signed as it stands" reasons={againstSigning} />
            ) : (
              <SignForm {...rest} result={resultOf("sign")} />
            )}
          </div>
          <div hidden={kind !== "refuse"}>
            {againstRefusing.length > 0 && !resultOf("refuse") ? (
              <Barrier title="You can’t refuse it" reasons={againstRefusing} />
            ) : (
              <RefuseForm {...{ version, signer, reloadHref }} result={resultOf("refuse")} />
            )}
          </div>
          <div hidden={kind !== "send-back"}>
            <SendBackForm {...{ version, reloadHref }} result={resultOf("send-back")} />
          </div>
        </>
      )}
    </Sheet>
  );
}

function Barrier({ title, reasons }: { title: string; reasons: readonly string[] }) {
  return (
    <div className="border-l-4 border-fail bg-fail-wash px-4 py-3">
      <p className="font-semibold text-fail">{title}</p>
      <ul className="mt-1 list-disc space-y-1 pl-6 text-sm">
        {reasons.map((reason) => (
          <li key={reason}>{reason}</li>
        ))}
      </ul>
    </div>
  );
}
