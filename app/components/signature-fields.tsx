/**
 * The signature of a form: drawn, or typed as a choice of equal standing, and the password that is asked for in the act.
 *   <SignatureFields fields={fields} signer={licence.holderName} />
 */
import { useId, useState } from "react";
import { SignaturePad } from "./signature-pad";
import { ChoiceGroupField } from "./ui/choice-group-field";
import { FieldErrors } from "./ui/field";
import { type FieldSource, fieldIds } from "./ui/field-source";
import { InputField } from "./ui/input-field";

export interface SignatureFieldsProps {
  fields: Record<"signatureMethod" | "signatureImage" | "typedName" | "password", FieldSource>;
  /** The name that must be typed. */
  signer: string;
}

export function SignatureFields({ fields, signer }: SignatureFieldsProps) {
  const labelId = useId();
  const ids = fieldIds(fields.signatureImage);
  const [image, setImage] = useState("");
  return (
    <div className="group/signature space-y-4">
      <ChoiceGroupField
        field={fields.signatureMethod}
        label="Signature"
        columns={2}
        options={[
          { value: "drawn", label: "Draw it", hint: "With finger, pen or mouse" },
          { value: "typed", label: "Type my name", hint: "Counts the same" },
        ]}
      />
      {/* Hidden by style, not removed: what was drawn is still there after a look at the other choice. */}
      <div className="group-has-[[value=typed]:checked]/signature:hidden">
        <p id={labelId} className="text-sm font-medium">
          Field for the drawn signature
        </p>
        <noscript>
          <p className="text-sm text-ink-soft">Drawing needs JavaScript. Type your name instead.</p>
        </noscript>
        <input
          type="hidden"
          name={fields.signatureImage.name}
          form={fields.signatureImage.formId}
          value={image}
        />
        <div id={ids.control} tabIndex={-1} className="mt-1">
          <SignaturePad labelledBy={labelId} onChange={setImage} />
        </div>
        <FieldErrors id={ids.error} errors={fields.signatureImage.errors} />
      </div>
      <div className="max-w-md group-has-[[value=drawn]:checked]/signature:hidden">
        <InputField
          field={fields.typedName}
          label="Your name"
          hint={`As your licence says it: ${signer}`}
          autoComplete="off"
          spellCheck={false}
        />
      </div>
      <InputField
        field={fields.password}
        label="Your password, again"
        hint="So that nobody signs in your name from a screen that you left."
        type="password"
        autoComplete="current-password"
        className="max-w-md"
      />
    </div>
  );
}
