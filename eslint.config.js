import { readdirSync } from "node:fs";
import { join } from "node:path";
import js from "@eslint/js";
import { createTypeScriptImportResolver } from "eslint-import-resolver-typescript";
import importX from "eslint-plugin-import-x";
import reactHooks from "eslint-plugin-react-hooks";
import globals from "globals";
import tseslint from "typescript-eslint";

const root = import.meta.dirname;
const foldersOf = (path) =>
  readdirSync(join(root, path), { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name);

/**
 * Which folder may not import which. Made from the folders that exist, so that a new folder is fenced at once.
 * `target` is the importing side, `from` what it may not reach.
 */
function importZones() {
  const packages = {
    kernels: { mayUse: [], sentence: "kernels stand alone: pass the value in instead." },
    backend: { mayUse: ["kernels"], sentence: "backend imports kernels only." },
    frontend: {
      mayUse: ["kernels", "backend"],
      sentence: "frontend reaches the server through @heddle/backend/contract.",
    },
  };
  const everywhere = ["kernels", "backend", "frontend", "tests", "drizzle"];
  const zones = [];
  for (const [name, { mayUse, sentence }] of Object.entries(packages)) {
    for (const other of everywhere.filter((folder) => folder !== name && !mayUse.includes(folder))) {
      zones.push({ target: `./${name}`, from: `./${other}`, message: sentence });
    }
  }
  for (const folder of foldersOf("backend/src").filter((name) => name !== "contract")) {
    const message = "pages see the server's contract, nothing behind it: use @heddle/backend/contract.";
    zones.push({ target: "./frontend", from: `./backend/src/${folder}`, message });
    zones.push({
      target: "./backend/src/contract",
      from: `./backend/src/${folder}`,
      message: "the contract imports kernels only.",
    });
  }
  for (const folder of foldersOf("kernels/src").filter((name) => name !== "cli")) {
    zones.push({
      target: `./kernels/src/${folder}`,
      from: "./kernels/src/cli",
      message: "numerics know no command line.",
    });
  }
  const features = foldersOf("frontend/src/features");
  for (const feature of features) {
    for (const other of features.filter((name) => name !== feature)) {
      zones.push({
        target: `./frontend/src/features/${feature}`,
        from: `./frontend/src/features/${other}`,
        message: `a feature never imports another: compose ${feature} and ${other} in frontend/src/app, or move what both need to the shared tier.`,
      });
    }
    zones.push({
      target: `./frontend/src/features/${feature}`,
      from: "./frontend/src/app",
      message: "app composes features, never the other way round.",
    });
  }
  for (const shared of ["components", "hooks", "lib"]) {
    for (const from of ["./frontend/src/app", "./frontend/src/features"]) {
      zones.push({ target: `./frontend/src/${shared}`, from, message: "the shared tier knows no feature." });
    }
  }
  return zones;
}

export default tseslint.config(
  {
    ignores: [
      "**/dist/**",
      "**/node_modules/**",
      "drizzle/**",
      "kernels/assembly/**",
      "**/*.gen.ts",
      "**/*.gen.d.ts",
    ],
  },
  js.configs.recommended,
  {
    files: ["**/*.{ts,tsx}"],
    extends: [...tseslint.configs.strictTypeChecked],
    languageOptions: {
      parserOptions: { projectService: { allowDefaultProject: ["vitest.config.ts"] }, tsconfigRootDir: root },
    },
    plugins: { "import-x": importX },
    settings: {
      "import-x/resolver-next": [
        createTypeScriptImportResolver({
          project: ["kernels", "backend", "frontend", "tests"].map((name) =>
            join(root, name, "tsconfig.json"),
          ),
          noWarnOnMultipleProjects: true,
          conditionNames: ["source", "types", "import", "default"],
        }),
      ],
    },
    rules: {
      "import-x/no-restricted-paths": ["error", { basePath: root, zones: importZones() }],
      "import-x/no-cycle": ["error", { maxDepth: 6 }],
      "@typescript-eslint/consistent-type-imports": "off", // Nest reads injected classes from value imports.
      "@typescript-eslint/no-extraneous-class": ["error", { allowWithDecorator: true }],
      "@typescript-eslint/restrict-template-expressions": [
        "error",
        { allowNumber: true, allowBoolean: true },
      ],
      "@typescript-eslint/no-confusing-void-expression": ["error", { ignoreArrowShorthand: true }],
      "@typescript-eslint/no-unnecessary-condition": ["error", { allowConstantLoopConditions: true }],
      eqeqeq: "error",
      "no-restricted-globals": ["error", { name: "alert", message: "Say it on the page." }],
      "no-console": ["error", { allow: ["error"] }],
    },
  },
  {
    files: ["kernels/src/**/*.ts"],
    ignores: ["kernels/src/cli/**", "kernels/src/threads/**", "**/*.spec.ts"],
    rules: {
      "no-restricted-imports": [
        "error",
        {
          patterns: [
            {
              group: ["node:*"],
              message: "numerics do no I/O and run in a browser too: only src/cli and src/threads may.",
            },
            {
              group: ["@nestjs/*", "react", "react-dom", "drizzle-orm"],
              message: "numerics know no framework.",
            },
          ],
        },
      ],
    },
  },
  {
    files: ["frontend/**/*.{ts,tsx}"],
    plugins: { "react-hooks": reactHooks },
    rules: { ...reactHooks.configs.recommended.rules },
  },
  {
    // Test doubles and parsed answers: the test itself is what checks the shape.
    files: ["**/*.spec.{ts,tsx}", "tests/**/*.ts"],
    rules: {
      "@typescript-eslint/no-non-null-assertion": "off",
      "@typescript-eslint/no-unsafe-assignment": "off",
      "@typescript-eslint/no-unsafe-member-access": "off",
      "@typescript-eslint/unbound-method": "off",
      "no-console": "off",
    },
  },
  { files: ["**/*.{js,mjs}"], languageOptions: { globals: { ...globals.node } } },
  { files: ["frontend/public/*.js"], languageOptions: { globals: { ...globals.browser } } },
);
