/**
 * What an error boundary knows of an error. Routes throw `data(message, { status })`, or `data({ message, … })` when
 * there is more to tell; everything else is a defect and tells the browser nothing.
 */
import { isRouteErrorResponse } from "react-router";
import type { TypedText } from "./conflict-notice";

export interface ErrorAnswer {
  status: number;
  message: string | null;
  /** What was typed into the form whose change met a conflict. */
  typed: TypedText[];
  reloadHref: string | null;
}

/** Reads a thrown value; never throws itself. */
export function errorAnswer(error: unknown): ErrorAnswer {
  if (!isRouteErrorResponse(error)) return { status: 500, message: null, typed: [], reloadHref: null };
  const told: unknown = error.data;
  if (typeof told === "string")
    return { status: error.status, message: publicMessage(error.status, told), typed: [], reloadHref: null };
  return {
    status: error.status,
    message: textMember(told, "message"),
    typed: typedMember(told),
    reloadHref: textMember(told, "reloadHref"),
  };
}

/** React Router's own 404 and 405 carry a technical sentence ("Error: No route matches …"); ours are for people. */
function publicMessage(status: number, text: string): string | null {
  if (status >= 500 && status !== 503) return null;
  return text === "" || text.startsWith("Error: ") ? null : text;
}

function textMember(value: unknown, name: string): string | null {
  if (typeof value !== "object" || value === null || !(name in value)) return null;
  const member: unknown = Object.entries(value).find(([key]) => key === name)?.[1];
  return typeof member === "string" && member !== "" ? member : null;
}

function typedMember(value: unknown): TypedText[] {
  if (typeof value !== "object" || value === null || !("typed" in value) || !Array.isArray(value.typed))
    return [];
  return value.typed.flatMap((entry: unknown) => {
    const label = textMember(entry, "label");
    const text = textMember(entry, "value");
    return label !== null && text !== null ? [{ label, value: text }] : [];
  });
}
