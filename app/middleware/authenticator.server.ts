import { type RouterContextProvider } from "react-router";
import { Authenticator } from "remix-auth";
import { FormStrategy } from "remix-auth-form";
import { z } from "zod";
import { clientAddressContext, type SignedInPerson } from "~/context";
import { AuthenticationError } from "~/services/errors";
import { authenticate } from "~/services/people/authenticate.server";
import { database } from "~/services/database.server";

/** Trimmed as the form's own schema does: a phone's keyboard likes to add a blank. */
const credentials = z.object({ email: z.string().trim().max(254), password: z.string().max(200) });

/**
 * Authenticates a sign-in form (fields `email` and `password`). The request's body must not have been read: give a
 * clone where the form is also parsed elsewhere.
 *
 * @throws AuthenticationError, ThrottledError
 */
export function authenticateForm(
  request: Request,
  context: Readonly<RouterContextProvider>,
): Promise<SignedInPerson> {
  const authenticator = new Authenticator<SignedInPerson>();
  authenticator.use(
    new FormStrategy(async ({ form }) => {
      const parsed = credentials.safeParse(Object.fromEntries(form));
      if (!parsed.success) throw new AuthenticationError("Mail and password are both needed.");
      return authenticate(
        database(),
        { ...parsed.data, address: context.get(clientAddressContext) },
        new Date(),
      );
    }),
    "password",
  );
  return authenticator.authenticate("password", request);
}
