import { type ReactNode, type RefObject, useEffect, useRef, useState } from "react";
import { useLocation, useNavigation, useRouteLoaderData } from "react-router";
import { forgetForm, keepForm, type KeptValues, readKept, wasTaken } from "./kept-form";
import { Button } from "./ui/button";

const shelf = () => sessionStorage;

/**
 * Keeps what is typed into a form in this tab until the form was taken: a session that ends, or leaving the page by
 * accident, loses nothing. Only for fields that the browser may keep; each is named.
 *
 * @returns the form's ref, and a notice to show above its fields (null unless something came back)
 */
export function useKeptForm(
  id: string,
  names: readonly string[],
): { ref: RefObject<HTMLFormElement | null>; notice: ReactNode } {
  const ref = useRef<HTMLFormElement>(null);
  const { pathname } = useLocation();
  const person = personOf(useRouteLoaderData("routes/workshop/layout"));
  const key = `form ${person} ${pathname} ${id}`;
  const [restored, setRestored] = useState(false);
  const named = names.join(" ");

  useEffect(() => {
    const form = ref.current;
    if (!form) return;
    const fields = named.split(" ");
    const kept = readKept(shelf, key, fields);
    if (kept && putBack(form, kept)) setRestored(true);
    const keep = () => keepForm(shelf, key, new FormData(form), fields);
    form.addEventListener("input", keep);
    return () => form.removeEventListener("input", keep);
  }, [key, named]);

  const taken = wasTaken(useNavigation(), pathname);
  useEffect(() => {
    if (taken) forgetForm(shelf, key);
  }, [taken, key]);

  function startAfresh() {
    forgetForm(shelf, key);
    ref.current?.reset();
    setRestored(false);
  }
  const notice = restored ? (
    <div role="status" className="flex flex-wrap items-center gap-3 bg-inset px-4 py-2">
      <p>What you typed here before is back; it was not sent.</p>
      <Button type="button" variant="quiet" onClick={startAfresh}>
        Start afresh
      </Button>
    </div>
  ) : null;
  return { ref, notice };
}

/** Writes the kept values into the form's controls; true when that changed any. */
function putBack(form: HTMLFormElement, kept: KeptValues): boolean {
  let changed = false;
  for (const control of form.elements) {
    if (control instanceof HTMLInputElement && control.type === "radio") {
      const value = kept[control.name];
      if (value === undefined || control.checked === (control.value === value)) continue;
      control.checked = control.value === value;
      changed = true;
    } else if (control instanceof HTMLInputElement || control instanceof HTMLTextAreaElement) {
      const value = kept[control.name];
      if (value === undefined || control.value === value) continue;
      control.value = value;
      changed = true;
    }
  }
  return changed;
}

/** What one person typed is not shown to the next one in the same tab. */
function personOf(layoutData: unknown): string {
  if (typeof layoutData !== "object" || layoutData === null || !("person" in layoutData)) return "";
  const { person } = layoutData;
  return typeof person === "object" && person !== null && "id" in person ? String(person.id) : "";
}
