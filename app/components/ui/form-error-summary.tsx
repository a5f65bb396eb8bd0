/**
 * What went wrong with a form, at its top. Field errors become links to their fields; errors of the whole form are
 * sentences. It takes the focus when it appears with form errors only: with field errors, conform has already
 * put the focus on the first of them.
 *   <FormErrorSummary form={form} labels={{ name: "Name", email: "E-mail" }} />
 */
import { OctagonAlert } from "lucide-react";
import { useEffect, useRef } from "react";

export interface FormErrorSource {
  id?: string;
  errorId?: string;
  errors?: string[] | undefined;
  /** Every error by field name; the form's own are under "". Conform's form metadata fits as it is. */
  allErrors?: Record<string, string[]>;
}

export interface FormErrorSummaryProps {
  form: FormErrorSource;
  /** Field names to the words on the screen. A field without one is named by its errors alone. */
  labels?: Record<string, string>;
  title?: string;
  className?: string;
}

export function FormErrorSummary({
  form,
  labels = {},
  title = "This could not be saved yet",
  className = "",
}: FormErrorSummaryProps) {
  const box = useRef<HTMLDivElement>(null);
  const formErrors = form.errors ?? [];
  const fieldErrors = Object.entries(form.allErrors ?? {}).filter(
    ([name, errors]) => name !== "" && errors.length > 0,
  );
  const onlyFormErrors = formErrors.length > 0 && fieldErrors.length === 0;
  const formErrorText = formErrors.join("\n");

  useEffect(() => {
    if (onlyFormErrors) box.current?.focus();
  }, [onlyFormErrors, formErrorText]);

  if (formErrors.length === 0 && fieldErrors.length === 0) return null;
  return (
    <div
      ref={box}
      id={form.errorId}
      role="alert"
      tabIndex={-1}
      className={`border-l-4 border-fail bg-fail-wash px-4 py-3 text-sm ${className}`}
    >
      <p className="flex items-center gap-2 font-semibold text-fail">
        <OctagonAlert aria-hidden size={18} className="shrink-0" />
        {title}
      </p>
      <ul className="mt-1 list-disc space-y-0.5 pl-6">
        {formErrors.map((error) => (
          <li key={error}>{error}</li>
        ))}
        {fieldErrors.map(([name, errors]) => (
          <li key={name}>
            <a
              href={`#${form.id ? `${form.id}-` : "field-"}${name}`}
              className="underline underline-offset-2"
            >
              {labels[name] ? `${labels[name]}: ` : ""}
              {errors.join("; ")}
            </a>
          </li>
        ))}
      </ul>
    </div>
  );
}
