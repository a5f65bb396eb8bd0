import { expect, test } from "vitest";
import type { SignedInPerson } from "~/context";
import { tables } from "~/db/client.server";
import { deriveBenchSheet } from "~/engine/bench-sheet";
import { demoMaps } from "~/engine/demo-maps";
import { findRuleSet } from "~/engine/rule-set";
import { database } from "~/services/database.server";
import { canonicalRecord } from "~/services/records/canonical-record";
import { objectStore } from "~/services/storage/object-store.server";
import type { UnitState } from "~/workflow/states";
import { sampleRecord } from "../fixtures/record";
import {
  everyRole,
  grantRoles,
  makeInstrument,
  makeLicence,
  makeMember,
  makePerson,
  makeUnit,
  makeWorkshop,
  TEST_MOMENT,
  type TestUnit,
  type TestWorkshop,
} from "../fixtures/workshop";
import { realHandler, type RealRoute } from "../helpers/request-handler";

/**
 * Every route and every action, asked for by everybody: the table below says, written out by hand, who may. Whoever
 * isn't named must be refused with 403; a visitor is led to the sign-in page (401 at the API); a member of another
 * workshop is told that there is no such workshop (404). A route without a line here fails, and so does a line that
 * no route answers to.
 */
const personas = [
  "its builder",
  "another builder",
  "its inspector",
  "another inspector",
  "electrician",
  "archivist",
  "steward",
] as const;
type Persona = (typeof personas)[number];

const everybody = personas;
const builders = ["its builder", "another builder"] as const;
const inspectors = ["its inspector", "another inspector"] as const;
const atTheBench = [...inspectors, "electrician", "steward"] as const;

interface Ask {
  /** The unit's state while the address is asked for; a draft unless told. */
  state?: UnitState;
  method?: "POST" | "PUT";
  /** A form that is right for the schema, so that only the permission can stop it; or JSON, for PUT. */
  body?: Record<string, string>;
  query?: string;
  may: readonly Persona[];
  /** What those who may get, where it isn't a page (200) or any answer to a change but a refusal. */
  answer?: number;
}

interface Line {
  get?: Ask;
  change?: Record<string, Ask>;
}

const pages: Record<string, Line> = {
  "routes/workshop/layout": { get: { may: everybody } },
  "routes/workshop/overview": { get: { may: everybody } },

  "routes/units/list": { get: { may: everybody } },
  "routes/units/new": { get: { may: builders }, change: { create: { may: builders } } },
  "routes/units/overview": {
    get: { may: everybody },
    change: {
      submit: { body: { intent: "submit", version: "1" }, may: ["its builder"] },
      discard: { body: { intent: "discard", version: "1" }, may: ["its builder"] },
      "start a new version": {
        state: "signed",
        body: { intent: "succeed", version: "1" },
        may: ["its builder"],
      },
      "hand over": {
        state: "sent_back",
        body: { intent: "hand-over", version: "1", to: ":person" },
        may: ["steward"],
      },
    },
  },
  "routes/units/facts": { get: { may: ["its builder"] }, change: { edit: { may: ["its builder"] } } },
  "routes/units/map": { get: { may: everybody } },
  "routes/units/rework": {
    get: { state: "sent_back", may: ["its builder"] },
    change: {
      resubmit: { state: "sent_back", body: { intent: "submit", version: "1" }, may: ["its builder"] },
    },
  },

  "routes/bench/queue": {
    get: { may: [...inspectors, "steward"] },
    change: {
      take: { state: "submitted", body: { act: "take", version: "1" }, may: inspectors },
      release: { state: "on_bench", body: { act: "release", version: "1" }, may: ["its inspector"] },
      reclaim: {
        state: "on_bench",
        body: { act: "reclaim", version: "1", reason: "Its inspector is ill." },
        may: ["steward"],
      },
    },
  },
  "routes/bench/sheet": { get: { state: "on_bench", may: atTheBench } },
  "routes/bench/check": {
    get: { state: "on_bench", query: "?key=:check", may: atTheBench },
    change: {
      observe: {
        state: "on_bench",
        body: { act: "observe", key: ":check", kind: "examined", conforms: "yes" },
        may: ["its inspector"],
      },
      "raise a finding": {
        state: "on_bench",
        body: { act: "raise-finding", key: ":check", severity: "advice", text: "Something" },
        may: ["its inspector"],
      },
      "close a finding": {
        state: "on_bench",
        body: { act: "close-finding", finding: ":finding", text: "Seen" },
        may: ["its inspector"],
      },
    },
  },
  "routes/bench/changes": {
    get: { state: "on_bench", may: atTheBench },
    change: {
      "carry over": { state: "on_bench", body: { version: "1", checks: "none" }, may: ["its inspector"] },
    },
  },
  "routes/bench/close": {
    get: { state: "on_bench", may: atTheBench },
    change: {
      finish: { state: "on_bench", body: { act: "finish", version: "1" }, may: ["its inspector"] },
      "send back": {
        state: "on_bench",
        body: { act: "send-back", version: "1", reason: "Something must be done about it." },
        may: ["its inspector"],
      },
    },
  },

  "routes/signing/queue": { get: { may: ["electrician", "steward"] } },
  "routes/signing/review": {
    get: { state: "awaiting_signature", may: ["electrician"] },
    change: {
      sign: {
        state: "awaiting_signature",
        body: {
          act: "sign",
          version: "1",
          statement: "I have examined it and it may be used.",
          recheckOn: "2099-01-01",
          signatureMethod: "typed",
          typedName: "Somebody",
          password: "whatever it is",
        },
        may: ["electrician"],
      },
      refuse: {
        state: "awaiting_signature",
        body: {
          act: "refuse",
          version: "1",
          statement: "It must not be used, for reasons.",
          signatureMethod: "typed",
          typedName: "Somebody",
          password: "whatever it is",
        },
        may: ["electrician"],
      },
      "send back": {
        state: "awaiting_signature",
        body: { act: "send-back", version: "1", reason: "Something must be done.", severity: "defect" },
        may: ["electrician"],
      },
    },
  },

  "routes/archive/search": { get: { may: [...inspectors, "electrician", "archivist", "steward"] } },
  "routes/archive/record": { get: { state: "signed", may: everybody } },
  "routes/archive/trail": { get: { state: "signed", may: ["electrician", "archivist", "steward"] } },
  "routes/archive/withdraw": {
    get: { state: "signed", may: ["electrician"] },
    change: {
      withdraw: {
        state: "signed",
        body: { version: "1", reason: "Something was found out.", password: "whatever it is" },
        may: ["electrician"],
      },
    },
  },

  "routes/stewardship/people": {
    get: { may: ["steward"] },
    change: {
      invite: {
        body: { intent: "invite", name: "New", email: "new@test.example", roles: "builder" },
        may: ["steward"],
      },
      "send again": { body: { intent: "resend", invitation: ":invitation" }, may: ["steward"] },
      cancel: { body: { intent: "cancel", invitation: ":invitation" }, may: ["steward"] },
    },
  },
  "routes/stewardship/person": {
    get: { may: ["steward"] },
    change: {
      roles: { body: { intent: "roles", expected: "archivist", roles: "steward" }, may: ["steward"] },
      remove: { body: { intent: "remove" }, may: ["steward"] },
    },
  },
  "routes/stewardship/licences": {
    get: { may: ["steward"] },
    change: {
      add: { body: { intent: "add" }, may: ["steward"] },
      revoke: { body: { intent: "revoke", licence: ":licence" }, may: ["steward"] },
    },
  },
  "routes/stewardship/instruments": {
    get: { may: [...inspectors, "electrician", "archivist", "steward"] },
  },
  "routes/stewardship/instrument-new": { get: { may: ["steward"] }, change: { add: { may: ["steward"] } } },
  "routes/stewardship/instrument": {
    get: { may: [...inspectors, "electrician", "archivist", "steward"] },
    change: { retire: { body: { intent: "retire" }, may: ["steward"] } },
  },
  "routes/stewardship/settings": { get: { may: ["steward"] }, change: { save: { may: ["steward"] } } },
};

const api: Record<string, Line> = {
  "routes/api/evaluate-map": {
    get: { may: everybody, answer: 405 },
    change: { evaluate: { may: everybody } },
  },
  "routes/api/units": { get: { may: everybody } },
  "routes/api/unit": { get: { may: everybody } },
  "routes/api/unit-map": {
    get: { may: everybody },
    change: { save: { method: "PUT", may: ["its builder"] } },
  },
  "routes/api/finding-answer": {
    change: { answer: { method: "PUT", state: "sent_back", may: ["its builder"] } },
  },
  "routes/api/unit-files": {
    get: { may: everybody },
    change: {
      "name the unit's photo": {
        body: { intent: "caption", fileId: ":file", caption: "Seen" },
        may: ["its builder"],
      },
      "take back a check's photo": {
        state: "on_bench",
        body: { intent: "remove", fileId: ":file" },
        may: ["its inspector"],
      },
    },
  },
  "routes/api/file": { get: { may: everybody } },
  "routes/api/queues": { get: { may: everybody } },
  "routes/api/record": { get: { state: "signed", may: everybody } },
};

/** Routes outside any workshop, each with what a visitor and a signed-in person get: [status, where to]. */
const open: Record<string, Record<string, { visitor: string; person: string }>> = {
  "routes/home": { GET: { visitor: "302 /sign-in", person: "200" } },
  "routes/auth/sign-in": {
    GET: { visitor: "200", person: "302 /" },
    // The action answers 400; the page's loader then leads the person on.
    POST: { visitor: "400", person: "302 /" },
  },
  "routes/auth/sign-out": {
    GET: { visitor: "302 /", person: "302 /" },
    POST: { visitor: "302 /sign-in?done=signed-out", person: "302 /sign-in?done=signed-out" },
  },
  "routes/auth/forgotten-password": {
    GET: { visitor: "200", person: "200" },
    POST: { visitor: "400", person: "400" },
  },
  // The token in the address is the permission, and the one asked for here is none.
  "routes/auth/reset": {
    GET: { visitor: "404", person: "404" },
    POST: { visitor: "400", person: "400" },
  },
  "routes/auth/invitation": {
    GET: { visitor: "404", person: "404" },
    POST: { visitor: "400", person: "400" },
  },
  "routes/account/account": {
    GET: { visitor: "302 /sign-in?to=%2Faccount", person: "200" },
    POST: { visitor: "302 /sign-in?to=%2Faccount", person: "400" },
  },
  "routes/public-record": { GET: { visitor: "404", person: "404" } },
  "routes/theme": { POST: { visitor: "302 /", person: "302 /" } },
  "routes/api/energy-map-schema": { GET: { visitor: "200", person: "200" } },
  "routes/api/unknown": {
    GET: { visitor: "404", person: "404" },
    POST: { visitor: "404", person: "404" },
  },
};

/** Parents that answer nothing by themselves. */
const silent = ["routes/api/workshop"];

const db = database();
const { routes, handle, cookieOf } = await realHandler();

const find = (id: string): RealRoute => {
  const route = routes.find((one) => one.id === id);
  if (!route) throw new Error(`No route answers to the line ${id}.`);
  return route;
};

interface Scene extends TestWorkshop {
  who: Record<Persona, SignedInPerson>;
  /** Holds every role, in another workshop. */
  foreigner: SignedInPerson;
  fill: Record<string, string>;
}

const map = demoMaps.sound;

/** A workshop with everybody in it and one unit in a state, with a finding, a file and what else an address names. */
async function makeScene(state: UnitState): Promise<Scene> {
  const made = await makeWorkshop(db);
  const who: Record<Persona, SignedInPerson> = {
    "its builder": made.people.builder,
    "another builder": await makeMember(db, made, ["builder"]),
    "its inspector": made.people.inspector,
    "another inspector": await makeMember(db, made, ["inspector"]),
    electrician: made.people.electrician,
    archivist: made.people.archivist,
    steward: made.people.steward,
  };
  const foreigner = await makePerson(db);
  const other = await makeWorkshop(db);
  await grantRoles(db, other.workshop.id, foreigner.id, everyRole);

  const unit = await makeUnit(db, made, { state, map });
  const licence = await makeLicence(db, made);
  if (state === "signed") await insertRecord(made, unit, licence);
  return {
    ...made,
    who,
    foreigner,
    fill: {
      ":workshop": made.workshop.slug,
      ":unit": String(unit.number),
      ":check": examinationKey(made),
      ":finding": String(await insertFinding(made, unit)),
      ":file": String(await insertPhoto(made, unit, state)),
      ":size": "thumb",
      ":form": "json",
      ":person": String(made.people.archivist.id),
      ":instrument": String(await makeInstrument(db, made)),
      ":licence": String(licence),
      ":invitation": String(await insertInvitation(made)),
    },
  };
}

const shared = new Map<UnitState, Promise<Scene>>();

/** A scene that is only read, or in which everything is refused: one for each state is enough. */
function sharedScene(state: UnitState = "draft"): Promise<Scene> {
  const scene = shared.get(state) ?? makeScene(state);
  shared.set(state, scene);
  return scene;
}

function examinationKey({ workshop }: Pick<TestWorkshop, "workshop">): string {
  const ruleSet = findRuleSet(workshop.ruleSetKey, workshop.ruleSetVersion);
  if (!ruleSet) throw new Error("The test workshop's rule set is gone.");
  const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "I" as const };
  const check = deriveBenchSheet(map, ruleSet, facts).find(({ asks }) => asks.kind === "examination");
  if (!check) throw new Error("The sheet of the sound demo map has no examination.");
  return check.key;
}

async function insertFinding({ people }: TestWorkshop, unit: TestUnit) {
  const [row] = await db
    .insert(tables.findings)
    .values({
      unitId: unit.id,
      revisionId: unit.revisionId,
      number: 1,
      severity: "advice",
      text: "Something",
      raisedById: people.inspector.id,
      raisedAt: TEST_MOMENT,
    })
    .$returningId();
  return row?.id;
}

async function insertPhoto({ workshop, people }: TestWorkshop, unit: TestUnit, state: UnitState) {
  const key = `authorisation/${unit.id}`;
  await objectStore().putBytes(key, new Uint8Array([1, 2, 3]), "image/jpeg");
  const onBench = state === "on_bench";
  const [row] = await db
    .insert(tables.files)
    .values({
      workshopId: workshop.id,
      unitId: unit.id,
      revisionId: unit.revisionId,
      kind: "photo",
      subject: onBench ? "check" : "unit",
      checkKey: onBench ? examinationKey({ workshop }) : null,
      contentType: "image/jpeg",
      bytes: 3,
      sha256: "0".repeat(64),
      storageKey: key,
      thumbKey: key,
      originalName: "photo.jpg",
      addedById: people.builder.id,
      addedAt: TEST_MOMENT,
    })
    .$returningId();
  return row?.id;
}

async function insertInvitation({ workshop }: TestWorkshop) {
  const invited = await makePerson(db);
  const [row] = await db
    .insert(tables.tokens)
    .values({
      hash: String(invited.id).padStart(64, "0"),
      purpose: "invitation",
      personId: invited.id,
      workshopId: workshop.id,
      roles: ["builder"],
      createdAt: TEST_MOMENT,
      expiresAt: new Date("2099-01-01"),
    })
    .$returningId();
  return row?.id;
}

async function insertRecord({ workshop, people }: TestWorkshop, unit: TestUnit, licenceId: number) {
  const [decision] = await db
    .insert(tables.decisions)
    .values({
      unitId: unit.id,
      revisionId: unit.revisionId,
      kind: "signed",
      signerId: people.electrician.id,
      licenceId,
      statement: "It may be used.",
      conditions: { place: "", supply: "", load: "", supervision: "", other: "" },
      recheckOn: "2099-01-01",
      signatureMethod: "typed",
      typedName: people.electrician.name,
      decidedAt: TEST_MOMENT,
    })
    .$returningId();
  const { json, sha256 } = canonicalRecord(sampleRecord());
  await db.insert(tables.records).values({
    workshopId: workshop.id,
    unitId: unit.id,
    decisionId: decision?.id ?? 0,
    publicCode: `authorisation-${unit.id}`,
    canonicalJson: json,
    sha256,
    madeAt: TEST_MOMENT,
  });
}

function requestFor(
  address: string,
  ask: Ask,
  fill: Scene["fill"],
  change: boolean,
  cookie?: string,
): Request {
  const filled = (address + (ask.query ?? "")).replace(/:\w+/g, (name) =>
    encodeURIComponent(fill[name] ?? "none"),
  );
  const headers = new Headers(cookie ? { Cookie: cookie } : {});
  const url = `http://mainsgate.test${filled}`;
  if (!change) return new Request(url, { headers });
  const fields = Object.entries({ unit: ":unit", ...ask.body });
  const body = fields.map(([name, value]): [string, string] => [name, fill[value] ?? value]);
  if (ask.method === "PUT") {
    headers.set("Content-Type", "application/json");
    return new Request(url, { method: "PUT", headers, body: JSON.stringify(Object.fromEntries(body)) });
  }
  return new Request(url, { method: "POST", headers, body: new URLSearchParams(body) });
}

/** Asks as everybody: whoever may is answered, and everybody else is refused in the way that is theirs. */
async function askAsEverybody(
  address: string,
  ask: Ask,
  { change, isApi }: { change: boolean; isApi: boolean },
) {
  const common = await sharedScene(ask.state);
  for (const persona of personas) {
    const may = ask.may.includes(persona);
    // Whoever may change something gets a scene of their own to change.
    const { who, fill } = may && change ? await makeScene(ask.state ?? "draft") : common;
    const answer = await handle(requestFor(address, ask, fill, change, await cookieOf(who[persona].id)));
    const told = `${persona} at ${address} got ${answer.status}`;
    if (!may) {
      expect(answer.status, told).toBe(403);
      if (isApi) expect(answer.headers.get("Content-Type"), told).toBe("application/problem+json");
    } else if (change) {
      expect([403, 404, 405, 500], told).not.toContain(answer.status);
      expect(answer.headers.get("Location") ?? "", told).not.toMatch(/^\/sign-in/);
    } else {
      expect(answer.status, told).toBe(ask.answer ?? 200);
    }
  }
  const foreign = await handle(
    requestFor(address, ask, common.fill, change, await cookieOf(common.foreigner.id)),
  );
  expect(foreign.status, `a member of another workshop at ${address}`).toBe(404);
  const visitor = await handle(requestFor(address, ask, common.fill, change));
  if (isApi) {
    expect(visitor.status, `a visitor at ${address}`).toBe(401);
    expect(visitor.headers.get("Content-Type")).toBe("application/problem+json");
  } else {
    expect(visitor.status, `a visitor at ${address}`).toBe(302);
    expect(visitor.headers.get("Location")).toMatch(/^\/sign-in\?to=%2Fw%2F/);
  }
}

test("every route has its line, and every line its route", () => {
  const lines = [...Object.keys(pages), ...Object.keys(api), ...Object.keys(open), ...silent].sort();
  expect(lines).toEqual(routes.map(({ id }) => id).sort());
});

test.each(routes)("the line of $id names what its module can do, and no more", ({ id, module }) => {
  const inWorkshop = pages[id] ?? api[id];
  const reads = inWorkshop ? inWorkshop.get !== undefined : open[id]?.GET !== undefined;
  const changes = inWorkshop ? inWorkshop.change !== undefined : open[id]?.POST !== undefined;
  expect({ reads, changes }).toEqual({
    reads: module.loader !== undefined,
    changes: module.action !== undefined,
  });
});

test("what lies in a workshop has its address there, and nothing else does", () => {
  for (const id of Object.keys(pages)) expect(find(id).address).toMatch(/^\/w\/:workshop/);
  for (const id of Object.keys(api)) expect(find(id).address).toMatch(/^\/api\/w\/:workshop\//);
  for (const id of Object.keys(open)) expect(find(id).address).not.toContain(":workshop");
});

const lines = [
  ...Object.entries(pages).map(([id, line]) => ({ id, line, isApi: false })),
  ...Object.entries(api).map(([id, line]) => ({ id, line, isApi: true })),
];

test.each(lines.flatMap(({ id, line, isApi }) => (line.get ? [{ id, ask: line.get, isApi }] : [])))(
  "reading $id",
  async ({ id, ask, isApi }) => {
    await askAsEverybody(find(id).address, ask, { change: false, isApi });
  },
);

test.each(
  lines.flatMap(({ id, line, isApi }) =>
    Object.entries(line.change ?? {}).map(([what, ask]) => ({ id, what, ask, isApi })),
  ),
)("changing by $id: $what", async ({ id, ask, isApi }) => {
  await askAsEverybody(find(id).address, ask, { change: true, isApi });
});

test.each(
  Object.entries(open).flatMap(([id, methods]) =>
    Object.entries(methods).map(([method, answers]) => ({ id, method, ...answers })),
  ),
)("$method $id as a visitor and as a person", async ({ id, method, visitor, person }) => {
  const address = find(id).address.replace(/:\w+/g, "none");
  const made = await makeWorkshop(db);
  const other = await makeWorkshop(db);
  await grantRoles(db, other.workshop.id, made.people.builder.id, ["builder"]);
  const ask = async (cookie?: string) => {
    const body = method === "POST" ? new URLSearchParams({ nothing: "useful" }) : undefined;
    const headers = new Headers(cookie ? { Cookie: cookie } : {});
    const answer = await handle(new Request(`http://mainsgate.test${address}`, { method, headers, body }));
    return [answer.status, answer.headers.get("Location")].filter((part) => part !== null).join(" ");
  };
  expect(await ask()).toBe(visitor);
  expect(await ask(await cookieOf(made.people.builder.id))).toBe(person);
});

test.each(["/api/nothing", "/api/units/1", "/api/w/any/nothing/here"])(
  "an unknown address of the API, %s, is told as Problem Details",
  async (address) => {
    for (const method of ["GET", "POST", "PUT", "DELETE"]) {
      const answer = await handle(new Request(`http://mainsgate.test${address}`, { method }));
      expect(answer.status).toBe(404);
      expect(answer.headers.get("Content-Type")).toBe("application/problem+json");
      expect(await answer.json()).toMatchObject({ status: 404, title: "Not found" });
    }
  },
);

test("a session that was ended, or a cookie that was tampered with, is nobody's", async () => {
  const { who, fill } = await makeScene("draft");
  const cookie = await cookieOf(who.steward.id);
  const ask: Ask = { may: [] };
  const { address } = find("routes/stewardship/people");
  expect((await handle(requestFor(address, ask, fill, false, cookie))).status).toBe(200);
  expect((await handle(requestFor(address, ask, fill, false, cookie.replace(/.$/, "x")))).status).toBe(302);
  await db.delete(tables.sessions);
  expect((await handle(requestFor(address, ask, fill, false, cookie))).status).toBe(302);
});

test("a person who was removed from the workshop a moment ago gets nothing of it", async () => {
  const { who, fill } = await makeScene("draft");
  const cookie = await cookieOf(who.steward.id);
  await db.delete(tables.memberships);
  for (const id of [...Object.keys(pages), ...Object.keys(api)]) {
    const { address, module } = find(id);
    if (!module.loader) continue;
    expect((await handle(requestFor(address, { may: [] }, fill, false, cookie))).status, id).toBe(404);
  }
});
