import { problemResponse } from "~/middleware/answers.server";

/** Whatever else is asked for below /api: said in the form that the API's callers read. */
export function loader() {
  return notFound();
}

export function action() {
  return notFound();
}

function notFound() {
  return problemResponse(404, "There is nothing at this address.");
}
