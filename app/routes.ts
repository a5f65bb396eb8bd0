import { index, prefix, route, type RouteConfig } from "@react-router/dev/routes";

/**
 * Every address of the product. Who may do what behind it is asked in the route's loader and action, of the one
 * permission table; tests/integration/authorisation.test.ts fails when a route is missing from its table.
 */
export default [
  index("routes/home.tsx"),

  route("sign-in", "routes/auth/sign-in.tsx"),
  route("sign-out", "routes/auth/sign-out.ts"),
  route("forgotten-password", "routes/auth/forgotten-password.tsx"),
  route("reset/:token", "routes/auth/reset.tsx"),
  route("invitation/:token", "routes/auth/invitation.tsx"),
  route("account", "routes/account/account.tsx"),
  route("theme", "routes/theme.ts"),
  route("r/:code", "routes/public-record.tsx"),

  route("w/:workshop", "routes/workshop/layout.tsx", [
    index("routes/workshop/overview.tsx"),
    // units
    route("units", "routes/units/list.tsx"),
    route("units/new", "routes/units/new.tsx"),
    route("units/:unit", "routes/units/overview.tsx"),
    route("units/:unit/facts", "routes/units/facts.tsx"),
    route("units/:unit/map", "routes/units/map.tsx"),
    route("units/:unit/rework", "routes/units/rework.tsx"),

    // bench
    route("bench", "routes/bench/queue.tsx"),
    route("bench/:unit", "routes/bench/sheet.tsx"),
    route("bench/:unit/check", "routes/bench/check.tsx"),
    route("bench/:unit/changes", "routes/bench/changes.tsx"),
    route("bench/:unit/close", "routes/bench/close.tsx"),

    // signing
    route("signing", "routes/signing/queue.tsx"),
    route("signing/:unit", "routes/signing/review.tsx"),

    // archive
    route("archive", "routes/archive/search.tsx"),
    route("archive/:unit", "routes/archive/record.tsx"),
    route("archive/:unit/trail", "routes/archive/trail.tsx"),
    route("archive/:unit/withdraw", "routes/archive/withdraw.tsx"),

    // stewardship
    route("people", "routes/stewardship/people.tsx"),
    route("people/:person", "routes/stewardship/person.tsx"),
    route("licences", "routes/stewardship/licences.tsx"),
    route("instruments", "routes/stewardship/instruments.tsx"),
    route("instruments/new", "routes/stewardship/instrument-new.tsx"),
    route("instruments/:instrument", "routes/stewardship/instrument.tsx"),
    route("settings", "routes/stewardship/settings.tsx"),
  ]),

  ...prefix("api", [
    route("energy-map.schema.json", "routes/api/energy-map-schema.ts"),
    route("w/:workshop", "routes/api/workshop.ts", [
      // units and files
      route("maps/evaluate", "routes/api/evaluate-map.ts"),
      route("units", "routes/api/units.ts"),
      route("units/:unit", "routes/api/unit.ts"),
      route("units/:unit/map", "routes/api/unit-map.ts"),
      route("units/:unit/findings/:finding/answer", "routes/api/finding-answer.ts"),
      route("units/:unit/files", "routes/api/unit-files.ts"),
      route("files/:file/:size", "routes/api/file.ts"),

      // queues
      route("queues", "routes/api/queues.ts"),

      // records
      route("records/:unit/:form", "routes/api/record.ts"),
    ]),
    route("*", "routes/api/unknown.ts"),
  ]),
] satisfies RouteConfig;
