// Lint rules: strict TypeScript with types, hooks, and rules of our own, each with its reason.
import hooks from "eslint-plugin-react-hooks";
import tseslint from "typescript-eslint";

export default tseslint.config(
  {
    ignores: [
      "node_modules/",
      "build/",
      ".react-router/",
      ".tenderband/",
      "tests/reference/",
      "tests/fixtures/",
      "tests/output/",
      "db/seeds/demo-data/",
    ],
  },
  tseslint.configs.strictTypeChecked,
  { files: ["app/**/*.tsx"], ...hooks.configs.flat.recommended },
  {
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      "@typescript-eslint/restrict-template-expressions": ["error", { allowNumber: true }],
      "@typescript-eslint/no-confusing-void-expression": ["error", { ignoreArrowShorthand: true }],
      // Counting code points is what is meant.
      "@typescript-eslint/no-misused-spread": "off",
      // Routes throw responses: that is how the framework answers early.
      "@typescript-eslint/only-throw-error": "off",
      // An empty arrow or destructured pattern is what the framework's types ask for at times.
      "@typescript-eslint/no-empty-function": "off",
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
      "no-restricted-syntax": [
        "error",
        {
          selector: "JSXAttribute[name.name='dangerouslySetInnerHTML']",
          message: "Markup from data is how scripts get in: render text.",
        },
        {
          selector: "MemberExpression[object.name='process'][property.name='env']",
          message: "app/config.server.ts is the one reader of process.env.",
        },
      ],
    },
  },
  {
    // Processes that make the environment of others, and tests that play them.
    files: [
      "*.ts",
      "app/config.server.ts",
      "app/create-administrator.ts",
      "app/start.ts",
      "app/start/**",
      "db/*.ts",
      "emails/sink.ts",
      "tests/**",
    ],
    rules: { "no-restricted-syntax": "off" },
  },
  {
    files: ["app/**/*.{ts,tsx}"],
    ignores: ["app/start.ts", "app/start/**"],
    rules: {
      "no-restricted-imports": [
        "error",
        {
          paths: [
            {
              name: "sequelize",
              importNames: ["literal", "fn", "col", "where"],
              message: "Raw SQL lives in db/queries.",
            },
          ],
        },
      ],
    },
  },
  { files: ["**/*.js", "**/*.cjs"], extends: [tseslint.configs.disableTypeChecked] },
);
