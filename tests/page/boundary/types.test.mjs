// The page's types hold for real reports: the compiler is shown some.
import assert from "node:assert/strict";
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import test from "node:test";
import { openCore, path } from "../support.mjs";

const core = await openCore();

function compile(source) {
  const folder = mkdtempSync(join(tmpdir(), "page-types-"));
  try {
    const file = join(folder, "reports.ts");
    writeFileSync(file, source);
    const tsc = path("web/node_modules/typescript/bin/tsc");
    const flags = ["--noEmit", "--strict", "--ignoreConfig", "--target", "es2022", "--module", "esnext", "--moduleResolution", "bundler"];
    return spawnSync(process.execPath, [tsc, ...flags, file], { encoding: "utf8" });
  } finally {
    rmSync(folder, { recursive: true });
  }
}

const types = `import type { CheckRow, Example, KeyInfo, Report, StudyReport } from ${JSON.stringify(path("web/src/engine/report"))};\n`;
const literal = (name, type, value) => `export const ${name} = ${JSON.stringify(value)} satisfies ${type};\n`;

test("reports, checks, keys and examples fit their types, with no field unknown to them", () => {
  const links = ["", "ac_mm_s2=1&to=jupiter", "steer=local", "steer=fixed", "park_km=none&deadline_d=500", "assembly_g_m2=3&capture_km=400", "geometry=spatial", "geometry=spatial&arrive=rendezvous&depart=2031-02-01&ac_mm_s2=1", "vinf_km_s=2"];
  const study = "geometry=spatial&arrive=rendezvous&ac_mm_s2=1&span=2031-02-01,2031-02-21&step_d=10";
  const points = core.study_items("dates", study).items.flatMap((item) => core.study_evaluate("dates", study, item));
  const source =
    types +
    links.map((link, i) => literal(`report${i}`, "Report", core.solve(link).report)).join("") +
    literal("study", "StudyReport", core.study_report("dates", study, points)) +
    literal("checks", "CheckRow[]", core.published_checks()) +
    literal("keys", "KeyInfo[]", core.link_keys()) +
    literal("examples", "Example[]", core.examples());
  const { status, stdout } = compile(source);
  assert.equal(status, 0, stdout);
});

test("a report with a field missing is noticed", () => {
  const { report } = core.solve("");
  delete report.flight.time_d;
  assert.notEqual(compile(types + literal("report", "Report", report)).status, 0);
});
