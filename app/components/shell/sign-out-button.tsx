/** Signs out, by a form, so that no link and no prefetch can do it. `<SignOutButton />` */
import { LogOut } from "lucide-react";
import { Form } from "react-router";
import { Button } from "../ui/button";

export function SignOutButton() {
  return (
    <Form method="post" action="/sign-out">
      <Button icon={LogOut}>Sign out</Button>
    </Form>
  );
}
