import type { ServiceContext } from "~/services/context.server";
import { type Recipient, tellHandOver, unitTitle } from "~/services/mail/hand-over.server";
import type { Act } from "~/services/unit-act.server";

type DecisionName = "sign" | "refuse" | "sendBackFromReview" | "withdraw" | "supersede";

interface Told {
  name: DecisionName;
  /** Reasons, or what was stated; of a supersession, the title of the new version. */
  statement: string;
  recheckOn: string | null;
}

const done: Record<DecisionName, string> = {
  sign: "signed",
  refuse: "refused",
  sendBackFromReview: "sent back",
  withdraw: "withdrawn",
  supersede: "superseded",
};

/** Tells everybody concerned how it was decided; in the transaction of the decision itself. */
export async function mailDecision(context: ServiceContext, act: Act, told: Told): Promise<void> {
  const { unit } = act;
  await tellHandOver(context, act, told.name, (recipient) => ({
    subject: `Unit ${unit.number} was ${done[told.name]}: ${unit.name}`,
    paragraphs: paragraphsOf(told, unitTitle(unit), context.person.name, recipient),
    link:
      told.name === "sendBackFromReview"
        ? {
            label: "See what is to be done",
            path: recipient.as === "builder" ? `/units/${unit.number}/rework` : `/units/${unit.number}`,
          }
        : { label: "See the record", path: `/archive/${unit.number}` },
  }));
}

function paragraphsOf(
  { name, statement, recheckOn }: Told,
  title: string,
  by: string,
  { as }: Recipient,
): string[] {
  switch (name) {
    case "sign":
      return [
        `${title}, was signed by ${by}. It may be plugged in under the conditions in the record, until ${recheckOn ?? "the recheck date"}.`,
        "Any change to the unit ends this. Start a new version on the unit’s page first; it is examined and signed in its own right.",
      ];
    case "refuse":
      return [`${title}, was refused by ${by}. It must not be plugged in.`, `The reasons: ${statement}`];
    case "sendBackFromReview":
      return [
        `${title}, was sent back from review by ${by}. It must not be plugged in meanwhile.`,
        `What stands in the way: ${statement}`,
        ...(as === "builder"
          ? ["Answer the findings, put it right and submit it again as a new revision."]
          : []),
      ];
    case "withdraw":
      return [
        `The signature on ${title}, was withdrawn by ${by}. It must not be plugged in any more: unplug it now and mark it.`,
        `The reason: ${statement}`,
      ];
    case "supersede":
      return [
        `${title}, was superseded: ${by} signed its new version, ${statement}.`,
        "The signature on the old version no longer counts. If the old one still exists beside the new one, unplug it and mark it.",
      ];
  }
}
