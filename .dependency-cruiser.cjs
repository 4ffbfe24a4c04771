const PURE = "^lib/(units|format|signal|logs|measure|compare|calibration|gates|policy|simulate)/";
const KERNEL = "^lib/(units|signal|logs|measure|compare|calibration|gates|policy|simulate)/";
const SERVICE_SCHEMA = "^lib/services/[^/]+/schema\\.ts$";
const NPM = ["npm", "npm-dev", "npm-optional", "npm-peer", "npm-no-pkg", "npm-unknown"];

const rule = (name, from, to) => ({ name, severity: "error", from, to });

/** @type {import("dependency-cruiser").IConfiguration} */
module.exports = {
  forbidden: [
    rule("no-circular", {}, { circular: true }),
    rule("no-unresolved", {}, { couldNotResolve: true, pathNot: "^server-only$" }),
    rule("app-is-a-leaf", { pathNot: "^(app|tests)/" }, { path: "^app/" }),
    rule("app-reads-through-services", { path: "^app/" }, { path: "^(db|storage)/" }),
    rule(
      "client-never-reaches-server",
      { path: "^(components|lib/client)/" },
      { path: "^(db|storage|lib/auth|lib/env)", reachable: true },
    ),
    rule(
      "client-sees-service-schemas-only",
      { path: "^(components|lib/client)/" },
      { path: "^lib/services/", pathNot: SERVICE_SCHEMA },
    ),
    rule(
      "ui-is-domain-free",
      { path: "^components/ui/" },
      { path: "^(app|components/(charts|features)|db|lib/(?!format|cn)|storage)" },
    ),
    rule(
      "charts-are-feature-free",
      { path: "^components/charts/" },
      { path: "^(components/features|lib/(client|services))/" },
    ),
    rule(
      "features-do-not-reach-into-each-other",
      { path: "^components/features/([^/]+)/" },
      { path: "^components/features/", pathNot: "^components/features/$1/" },
    ),
    rule(
      "pure-lib-stays-pure",
      { path: PURE },
      { path: "^(app|components|db|storage|lib)/", pathNot: `${PURE}|^lib/(errors|canonical-json)` },
    ),
    rule(
      "pure-lib-no-framework",
      { path: PURE },
      {
        dependencyTypes: [...NPM, "core"],
        pathNot: "^(node:)?(zlib|crypto)$|node_modules/(@types/)?(papaparse|saxes|diff|libdiff)/",
      },
    ),
    rule(
      "services-are-framework-free",
      { path: "^lib/services/" },
      { path: "^(app|components|lib/client)/|node_modules/(next|react|@tanstack)/" },
    ),
    rule(
      "service-internals-are-private",
      { path: "^lib/services/([^/]+)/" },
      { path: "^lib/services/[^/]+/internal\\.ts$", pathNot: "^lib/services/$1/" },
    ),
    rule(
      "schemas-are-isomorphic",
      { path: SERVICE_SCHEMA },
      {
        path: "^(db|storage|lib/(auth|env|runtime|services/[^/]+/(?!schema)))",
        dependencyTypesNot: ["type-only"],
      },
    ),
    rule(
      "db-is-the-bottom",
      { path: "^db/", pathNot: "^db/seed/" },
      { path: "^(app|components|storage|lib/(?!env|errors|ids))", dependencyTypesNot: ["type-only"] },
    ),
    rule("storage-is-the-bottom", { path: "^storage/" }, { path: "^(app|components|db|lib/(?!env|errors))" }),
    rule(
      "drizzle-only-in-db",
      { pathNot: "^(db/|tests/|drizzle\\.config)" },
      { path: "node_modules/(drizzle-orm|pg|postgres)/" },
    ),
    rule("s3-sdk-only-in-storage", { pathNot: "^(storage/|tests/)" }, { path: "node_modules/@aws-sdk/" }),
    rule(
      "charting-only-in-charts",
      { pathNot: "^(components/charts/|tests/)" },
      { path: "node_modules/(@visx/|d3-(?!array))" },
    ),
    rule(
      "descriptions-are-read-by-the-worker",
      { path: "^(app|components|lib/(client|services))/" },
      {
        path: "^lib/calibration/(a2l/read-description|values/read-image-by-description)\\.ts$",
        reachable: true,
      },
    ),
    rule("kernel-has-a-test", { path: "^tests/unit/" }, { path: KERNEL, reachable: false }),
    rule("product-never-imports-tests", { pathNot: "^tests/" }, { path: "^tests/" }),
    rule(
      "setup-runs-before-packages-are-there",
      { path: "^docker-less-setup/", pathNot: "\\.config\\.mts$" },
      { dependencyTypesNot: ["core", "local", "type-only"], pathNot: "^(docker-less-setup|tests)/" },
    ),
    rule("setup-is-apart", { path: "^docker-less-setup/" }, { path: "^(app|components|db|lib|storage)/" }),
    rule(
      "product-never-imports-setup",
      { path: "^(app|components|db|lib|storage)/" },
      { path: "^docker-less-setup/" },
    ),
  ],
  options: {
    doNotFollow: { path: "node_modules" },
    exclude: { path: "^(\\.next|\\.data)/" },
    tsConfig: { fileName: "tsconfig.json" },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: {
      exportsFields: ["exports"],
      conditionNames: ["import", "types", "node", "default"],
    },
  },
};
