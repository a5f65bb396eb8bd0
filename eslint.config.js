import reactHooks from "eslint-plugin-react-hooks";
import tseslint from "typescript-eslint";

/** What each layer may not import: the table in DEVELOPERS.md, enforced. */
const layers = [
  {
    files: ["app/engine/**"],
    except: ["app/**/*.test.ts"],
    deny: [
      "~/db/*",
      "~/services/*",
      "~/workflow/*",
      "~/routes/*",
      "~/components/*",
      "~/middleware/*",
      "~/context",
      "node:*",
      "react",
      "react-router",
    ],
  },
  {
    files: ["app/workflow/**"],
    except: ["app/**/*.test.ts"],
    deny: [
      "~/db/*",
      "~/services/*",
      "~/routes/*",
      "~/components/*",
      "~/middleware/*",
      "~/context",
      "node:*",
      "react",
    ],
  },
  {
    files: ["app/db/**"],
    except: [],
    deny: ["~/services/*", "~/routes/*", "~/components/*", "~/middleware/*", "~/engine/*"],
  },
  {
    files: ["app/services/**"],
    except: [],
    deny: ["~/routes/*", "~/components/*", "~/middleware/*", "react-router"],
  },
  {
    files: ["app/components/**"],
    except: [],
    deny: ["~/db/*", "~/services/*", "~/routes/*", "~/middleware/*"],
  },
  { files: ["app/middleware/**"], except: [], deny: ["~/routes/*", "~/components/*", "~/engine/*"] },
  { files: ["app/routes/**"], except: [], deny: ["~/db/*"] },
];

export default tseslint.config(
  { ignores: ["build/", ".react-router/", "node_modules/", ".data/", "drizzle/", "coverage/"] },
  ...tseslint.configs.recommended,
  {
    files: ["app/**/*.{ts,tsx}"],
    plugins: { "react-hooks": reactHooks },
    rules: { "react-hooks/rules-of-hooks": "error", "react-hooks/exhaustive-deps": "error" },
  },
  {
    rules: {
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/consistent-type-imports": "error",
      eqeqeq: ["error", "always"],
    },
  },
  {
    files: ["app/engine/**/*.ts"],
    ignores: ["**/*.test.ts"],
    rules: {
      "no-restricted-globals": ["error", "Date", "process", "window", "document", "fetch"],
      "no-restricted-properties": [
        "error",
        { object: "Math", property: "random", message: "The engine is deterministic." },
      ],
    },
  },
  ...layers.map(({ files, except, deny }) => ({
    files,
    ignores: except,
    rules: { "no-restricted-imports": ["error", { patterns: deny.map((group) => ({ group: [group] })) }] },
  })),
);
