import { useState } from "react";
import { useRevalidator } from "react-router";
import { PhotoStrip } from "~/components/photo-strip";
import { PhotoUpload } from "~/components/photo-upload";
import { useKeptText } from "~/components/use-kept-text";
import { TextareaField } from "~/components/ui/textarea-field";
import { Time } from "~/components/ui/time";
import { FindingHead, FindingHistory, type FindingItem } from "./finding-list";

export interface AnswerFormProps {
  finding: FindingItem;
  api: string;
  unit: number;
  /** The revision being reworked. */
  revision: number;
  /** Names the copy of an unsaved answer in the browser. */
  keptKey: string;
}

/** One finding with the builder's answer of this round, which saves itself, and its photos. */
export function AnswerForm({ finding, api, unit, revision, keptKey }: AnswerFormProps) {
  const answer = finding.answers.find((each) => each.revision === revision);
  const revalidator = useRevalidator();
  const { text, setText, state, flush } = useKeptText({
    url: `${api}/units/${unit}/findings/${finding.id}/answer`,
    keptKey,
    saved: answer?.text ?? "",
    onSaved: () => void revalidator.revalidate(),
  });
  const [uploadFields] = useState({ subject: "answer", findingId: String(finding.id) });
  return (
    <li id={`finding-${finding.number}`} className="space-y-3 px-4 py-4">
      <FindingHead finding={finding} />
      <PhotoStrip
        files={finding.photos.filter((photo) => photo.subject === "finding")}
        api={api}
        unit={unit}
        alt={`Finding ${finding.number}`}
      />
      <FindingHistory finding={finding} api={api} unit={unit} before={revision} />
      <TextareaField
        field={{ name: `answer-${finding.id}` }}
        label={`Your answer to finding ${finding.number}`}
        value={text}
        maxLength={4000}
        rows={3}
        onChange={(event) => setText(event.currentTarget.value)}
        onBlur={() => void flush()}
      />
      <p
        role="status"
        className={`text-sm ${state.kind === "failed" ? "font-medium text-fail" : "text-ink-soft"}`}
      >
        {state.kind === "failed" ? (
          `Not saved. ${state.message} What you typed stays on this device.`
        ) : state.kind === "saving" ? (
          "Saving"
        ) : state.kind === "unsaved" ? (
          "Not saved yet"
        ) : answer ? (
          <>
            Saved <Time at={answer.answeredAt} />
          </>
        ) : (
          "No answer yet"
        )}
      </p>
      <PhotoStrip
        files={finding.photos.filter((photo) => photo.subject === "answer" && photo.revision === revision)}
        api={api}
        unit={unit}
        editableRevision={revision}
        alt={`Answer to finding ${finding.number}`}
      />
      <PhotoUpload
        action={`${api}/units/${unit}/files`}
        fields={uploadFields}
        label="Add photos to the answer"
      />
    </li>
  );
}
