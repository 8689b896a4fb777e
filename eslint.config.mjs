import pluginVue from "eslint-plugin-vue";
import tseslint from "typescript-eslint";
import vueParser from "vue-eslint-parser";

/**
 * The import law of the house. Each message says what to do instead.
 */
const wing = (files, patterns) => ({
  files,
  rules: { "no-restricted-imports": ["error", { patterns }] },
});

const noFetch = {
  selector: "CallExpression[callee.name='fetch']",
  message: "Only src/api/client.ts calls fetch: add a query or mutation in src/queries and use the client there.",
};
const noEnv = {
  selector: "MemberExpression[object.name='process'][property.name='env']",
  message: "Only server/config.ts reads process.env: add the setting there and pass it on.",
};
const noEnum = { selector: "TSEnumDeclaration", message: "Use a const list in shared/domain/vocabulary.ts." };
const noWrite = {
  selector:
    "CallExpression[callee.property.name=/^(create|bulkCreate|update|destroy|upsert|increment|decrement|save|truncate|sync)$/][callee.object.name=/^[A-Z]/]",
  message: "Only server/db/write.ts opens writes: call write(...) and use the writer it hands you.",
};

export default tseslint.config(
  { ignores: ["node_modules", "dist", "coverage", ".data"] },
  ...tseslint.configs.recommended,
  ...pluginVue.configs["flat/recommended"],
  {
    files: ["**/*.vue"],
    languageOptions: { parser: vueParser, parserOptions: { parser: tseslint.parser, sourceType: "module" } },
  },
  {
    rules: {
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/consistent-type-imports": ["error", { fixStyle: "separate-type-imports" }],
      "@typescript-eslint/no-unused-vars": [
        "error",
        { argsIgnorePattern: "^_", varsIgnorePattern: "^_", ignoreRestSiblings: true },
      ],
      "no-console": "error",
      eqeqeq: ["error", "always"],
      "max-lines": ["error", { max: 500, skipBlankLines: false, skipComments: false }],
      "no-restricted-syntax": ["error", noEnum],
      // Prettier decides layout.
      "vue/max-attributes-per-line": "off",
      "vue/singleline-html-element-content-newline": "off",
      "vue/multiline-html-element-content-newline": "off",
      "vue/html-self-closing": "off",
      "vue/html-indent": "off",
      "vue/html-closing-bracket-newline": "off",
      "vue/first-attribute-linebreak": "off",
      "vue/attributes-order": "off",
      "vue/require-default-prop": "off",
      "vue/valid-v-slot": ["error", { allowModifiers: true }],
    },
  },
  wing(
    ["shared/**"],
    [
      {
        group: ["**/server/**", "**/src/**"],
        message: "shared/ leans on nothing: move the code that both wings need into shared/.",
      },
      {
        regex: "^(?!zod$|\\.{1,2}/)",
        message:
          "shared/ imports only zod and itself: pass values in, or keep the code in the wing that has the package.",
      },
    ],
  ),
  wing(
    ["src/**"],
    [{ group: ["**/server/**"], message: "src/ never imports server/: share the schema or function through shared/." }],
  ),
  wing(
    ["server/**"],
    [{ group: ["**/src/**"], message: "server/ never imports src/: share the schema or function through shared/." }],
  ),
  { files: ["src/**"], ignores: ["src/api/client.ts"], rules: { "no-restricted-syntax": ["error", noEnum, noFetch] } },
  {
    files: ["server/**"],
    ignores: ["server/config.ts", "server/db/write.ts"],
    rules: { "no-restricted-syntax": ["error", noEnum, noEnv, noWrite] },
  },
  { files: ["scripts/**", "tests/**", "*.ts", "*.mjs"], rules: { "no-console": "off" } },
);
