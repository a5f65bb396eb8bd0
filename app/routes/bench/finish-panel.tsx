import { CameraOff, CircleCheckBig } from "lucide-react";
import { Form, Link, useNavigation } from "react-router";
import { LineVerdictBadge } from "~/components/bench-verdict";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { Sheet } from "~/components/ui/sheet";
import { isDecided } from "~/engine/bench-answer";
import type { Route } from "./+types/close";
import { checkHref } from "./check-href";

type Data = Route.ComponentProps["loaderData"];
type Result = Route.ComponentProps["actionData"];

/** Hands the sheet over for signature, or tells what still stands in the way and where. */
export function FinishPanel({
  unit,
  lines,
  base,
  result,
}: Pick<Data, "unit" | "lines"> & { base: string; result: Result }) {
  const navigation = useNavigation();
  const pending = navigation.formData?.get("act") === "finish";
  const undecided = lines.filter((line) => !isDecided(line.verdict));
  const photoless = lines.filter((line) => line.photoMissing);
  const failed = lines.filter((line) => line.verdict === "fail");
  const ready = lines.length > 0 && undecided.length === 0 && photoless.length === 0;
  // The server's sentences are the list below; only what the page doesn't know yet is told beside it.
  const reasons = result?.error?.[""];
  const refusals =
    reasons && !ready ? ["What stands in the way is listed below, with links."] : (reasons ?? undefined);
  return (
    <Sheet title="Finish the sheet" lead="Hands the unit over for review and signature.">
      <div className="space-y-4">
        {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={`${base}/close`} /> : null}
        <FormErrorSummary form={{ errors: refusals }} title="The sheet can’t be finished yet" />
        {ready ? (
          <p>Every check is decided and every required photo is there.</p>
        ) : (
          <div className="space-y-3 border-l-4 border-undecided bg-undecided-wash px-4 py-3">
            <p className="font-semibold">What still stands in the way</p>
            {lines.length === 0 ? <p>The map calls for no check, so nothing can be decided.</p> : null}
            <ul className="space-y-1.5">
              {undecided.map((line) => (
                <li key={line.check.key} className="grid grid-cols-[8.5rem_1fr] items-center gap-2">
                  <span>
                    <LineVerdictBadge verdict={line.verdict} />
                  </span>
                  <CheckLink base={base} check={line.check} />
                </li>
              ))}
              {photoless.map((line) => (
                <li
                  key={`photo ${line.check.key}`}
                  className="grid grid-cols-[8.5rem_1fr] items-center gap-2"
                >
                  <span className="inline-flex items-center gap-1.5 text-sm font-semibold">
                    <CameraOff aria-hidden size={17} /> Photo missing
                  </span>
                  <CheckLink base={base} check={line.check} />
                </li>
              ))}
            </ul>
          </div>
        )}
        {failed.length > 0 ? (
          <Caution title={failed.length === 1 ? "One check failed" : `${failed.length} checks failed`}>
            <p>
              The sheet can be finished all the same: an electrician must be able to refuse on it. If the
              builder should put it right first, send it back instead.
            </p>
            <ul className="mt-2 list-disc pl-5">
              {failed.map((line) => (
                <li key={line.check.key}>
                  <Link to={checkHref(base, line.check.key)} className="text-link">
                    {line.check.title}
                  </Link>
                </li>
              ))}
            </ul>
          </Caution>
        ) : null}
        <Form method="post" className="space-y-3">
          <input type="hidden" name="act" value="finish" />
          <input type="hidden" name="version" value={unit.version} />
          <Button
            size="bench"
            variant="primary"
            icon={CircleCheckBig}
            pending={pending}
            pendingLabel="Finishing…"
          >
            Finish the sheet
          </Button>
        </Form>
      </div>
    </Sheet>
  );
}

function CheckLink({ base, check }: { base: string; check: { key: string; title: string } }) {
  return (
    <Link
      to={checkHref(base, check.key)}
      className="text-link inline-flex min-h-8 items-center pointer-coarse:min-h-11"
    >
      {check.title}
    </Link>
  );
}
