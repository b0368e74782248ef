import next from "eslint-config-next";
import typescript from "eslint-config-next/typescript";

const UNUSED = ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_", caughtErrorsIgnorePattern: "^_" }];

export default [
  { ignores: [".next/**", ".data/**", "node_modules/**", "public/**", "next-env.d.ts"] },
  ...next,
  ...typescript,
  {
    settings: { next: { rootDir: "." }, react: { version: "19" } },
    rules: {
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/no-unused-vars": UNUSED,
      "@typescript-eslint/consistent-type-imports": ["error", { fixStyle: "separate-type-imports", disallowTypeAnnotations: false }],
      // Takes every member of an object that carries a ref for the ref itself.
      "react-hooks/refs": "off",
      eqeqeq: ["error", "always"],
      "no-restricted-syntax": [
        "error",
        { selector: "TSEnumDeclaration", message: "Use a list `as const` and its union." },
        { selector: "MemberExpression[object.name='process'][property.name='env']", message: "Settings come from src/env.ts." },
      ],
      "no-restricted-imports": ["error", { patterns: [{ group: ["../../*"], message: "Across folders write @/layer/…" }] }],
    },
  },
  {
    // The one reader of the environment, the scripts that set it, and what the builder inlines.
    files: ["src/env.ts", "src/instrumentation.ts", "src/ops/**", "src/proxy.ts", "tests/**", "seed/**"],
    rules: { "no-restricted-syntax": "off" },
  },
  {
    // Playwright's fixtures call `use`, which is no React hook.
    files: ["tests/**"],
    rules: { "react-hooks/rules-of-hooks": "off" },
  },
];
