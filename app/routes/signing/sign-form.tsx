import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { PenLine } from "lucide-react";
import { Form, useNavigation } from "react-router";
import { SignatureFields } from "~/components/signature-fields";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptForm } from "~/components/use-kept-form";
import type { FormRefusal } from "~/middleware/form-refusal.server";
import { usualStatement } from "~/services/signing/signing-rules";
import { signSchema } from "./decide.schema";

/** What this tab keeps until the form was taken. */
const keptFields = [
  "statement",
  "departures",
  "place",
  "supply",
  "load",
  "supervision",
  "other",
  "recheckOn",
];

export interface SignFormProps {
  version: number;
  signer: string;
  result: FormRefusal | undefined;
  reloadHref: string;
  /** Titles of the checks that fail. */
  failed: readonly string[];
  openFindings: number;
  proposal: { place: string; supply: string; recheckOn: string; earliest: string; latest: string };
}

/** States, sets the conditions and the recheck date, and signs. */
export function SignForm({
  version,
  signer,
  result,
  reloadHref,
  failed,
  openFindings,
  proposal,
}: SignFormProps) {
  const pending = useNavigation().formData?.get("act") === "sign";
  const kept = useKeptForm("sign", keptFields);
  const [form, fields] = useForm({
    id: "sign",
    lastResult: result,
    constraint: getZodConstraint(signSchema),
    defaultValue: {
      statement: usualStatement,
      place: proposal.place,
      supply: proposal.supply,
      recheckOn: proposal.recheckOn,
      signatureMethod: "drawn",
    },
    onValidate: ({ formData }) => parseWithZod(formData, { schema: signSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Form method="post" {...getFormProps(form)} ref={kept.ref} className="space-y-6">
      {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={reloadHref} /> : null}
      {kept.notice}
      <FormErrorSummary form={form} labels={signLabels} title="It was not signed" />
      <input type="hidden" name="act" value="sign" />
      <input type="hidden" name="version" value={version} />
      {failed.length > 0 ? (
        <div className="space-y-3">
          <Caution
            title={failed.length === 1 ? "One check fails" : `${failed.length} checks fail`}
            items={failed}
          />
          <TextareaField
            field={fields.departures}
            label="Why it may be used all the same"
            hint="Your own reasons and what limits the risk. They stand on the record’s first sheet."
            rows={3}
          />
        </div>
      ) : null}
      {openFindings > 0 ? (
        <p className="font-medium text-undecided">
          {openFindings === 1
            ? "One finding is open; it is no danger. The record will show it."
            : `${openFindings} findings are open, none of them a danger. The record will show them.`}
        </p>
      ) : null}
      <TextareaField field={fields.statement} label="What your signature states" rows={4} />
      <fieldset className="grid gap-4 md:grid-cols-2">
        <legend className="mb-1 font-semibold">Conditions of use</legend>
        <p className="text-sm text-ink-soft md:col-span-2">
          Anybody who scans the unit’s code reads them: name no person here. Empty means no condition.
        </p>
        <TextareaField field={fields.place} label="Place" rows={2} optional />
        <TextareaField field={fields.supply} label="Supply" rows={2} optional />
        <TextareaField field={fields.load} label="Load" rows={2} optional />
        <TextareaField field={fields.supervision} label="Supervision" rows={2} optional />
        <TextareaField field={fields.other} label="Other" rows={2} optional className="md:col-span-2" />
      </fieldset>
      <InputField
        field={fields.recheckOn}
        label="Recheck by"
        hint="From the day after, the signature has lapsed."
        type="date"
        min={proposal.earliest}
        max={proposal.latest}
        className="max-w-xs"
      />
      <SignatureFields fields={fields} signer={signer} />
      <Button variant="primary" size="bench" icon={PenLine} pending={pending} pendingLabel="Signing…">
        Sign
      </Button>
    </Form>
  );
}

const signLabels = {
  statement: "What your signature states",
  departures: "Why it may be used all the same",
  recheckOn: "Recheck by",
  signatureMethod: "Signature",
  signatureImage: "Drawn signature",
  typedName: "Your name",
  password: "Password",
};
