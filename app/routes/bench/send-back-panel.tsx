import { getFormProps, useForm } from "@conform-to/react";
import { parseWithZod } from "@conform-to/zod/v4";
import { Undo2 } from "lucide-react";
import { Form, useNavigation } from "react-router";
import { useKeptDraft } from "~/components/bench-kept-draft";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { Sheet } from "~/components/ui/sheet";
import { TextareaField } from "~/components/ui/textarea-field";
import { z } from "zod";
import type { Route } from "./+types/close";
import { sendBackSchema } from "./close.schema";

type Data = Route.ComponentProps["loaderData"];
type Result = Route.ComponentProps["actionData"];

const reasonDraftSchema = z.object({ reason: z.string() });

function parseReasonDraft(kept: unknown) {
  const parsed = reasonDraftSchema.safeParse(kept);
  return parsed.success ? parsed.data : null;
}

/** Sends the unit back to its builder, with the reason and the open findings. */
export function SendBackPanel({
  unit,
  openFindings,
  draftKey,
  base,
  result,
}: Pick<Data, "unit"> & { openFindings: number; draftKey: string; base: string; result: Result }) {
  const navigation = useNavigation();
  const pending = navigation.formData?.get("act") === "send-back";
  const draft = useKeptDraft(`${draftKey} reason`, { reason: "" }, parseReasonDraft);
  const [form, fields] = useForm({
    id: "send-back",
    lastResult: result,
    onValidate: ({ formData }) => parseWithZod(formData, { schema: sendBackSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet
      title="Send it back"
      lead="Opens a new revision; the builder answers the findings and submits again."
    >
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={`${base}/close`} /> : null}
        <FormErrorSummary form={form} labels={{ reason: "Reason" }} title="It was not sent back" />
        <p className={openFindings === 0 ? "font-medium text-undecided" : ""}>
          {openFindings === 0
            ? "There is no open finding yet: raise one, so that the builder knows what to put right."
            : `${openFindings} open ${openFindings === 1 ? "finding goes" : "findings go"} with it.`}
        </p>
        <input type="hidden" name="act" value="send-back" />
        <input type="hidden" name="version" value={unit.version} />
        <TextareaField
          field={fields.reason}
          label="Why it goes back"
          size="bench"
          rows={3}
          maxLength={2000}
          value={draft.values.reason}
          onChange={(event) => draft.change({ reason: event.currentTarget.value })}
        />
        <Button size="bench" variant="danger" icon={Undo2} pending={pending} pendingLabel="Sending back…">
          Send it back to the builder
        </Button>
      </Form>
    </Sheet>
  );
}
