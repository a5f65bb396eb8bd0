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

  route("w/:workshop", "routes/workshop/layout.tsx", [
    index("routes/workshop/overview.tsx"),
    // units

    // bench

    // signing

    // archive

    // stewardship
  ]),

  ...prefix("api", [
    route("energy-map.schema.json", "routes/api/energy-map-schema.ts"),
    route("w/:workshop", "routes/api/workshop.ts", [
      // units and files
      route("maps/evaluate", "routes/api/evaluate-map.ts"),
      route("units", "routes/api/units.ts"),
      route("units/:unit", "routes/api/unit.ts"),
      route("units/:unit/files", "routes/api/unit-files.ts"),
      route("files/:file/:size", "routes/api/file.ts"),

      // queues

      // records
    ]),
  ]),
] satisfies RouteConfig;
