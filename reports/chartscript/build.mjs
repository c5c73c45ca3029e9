// Builds ../assets/chart.js from entry.js and records its SHA-256 beside it. `npm ci && npm run build` gives the same
// bytes again; the test of package reports compares the recorded hash with the embedded file.
import { createHash } from "node:crypto";
import { copyFileSync, readFileSync, writeFileSync } from "node:fs";
import { build } from "esbuild";

const out = "../assets/chart.js";
await build({
  entryPoints: ["entry.js"],
  outfile: out,
  bundle: true,
  minify: true,
  format: "iife",
  target: "es2019",
  charset: "ascii",
  legalComments: "none",
  define: { "process.env.NODE_ENV": '"production"' },
});

const script = readFileSync(out);
const text = script.toString("utf8");
for (const bad of ["</script", "<!--", "eval(", "new Function"]) {
  if (text.includes(bad)) throw new Error(`the bundle holds ${bad}`);
}
const sum = createHash("sha256").update(script).digest("hex");
writeFileSync("../assets/chart.js.sha256", `${sum}  chart.js\n`);
copyFileSync("node_modules/echarts/LICENSE", "../assets/echarts-LICENSE.txt");
copyFileSync("node_modules/echarts/NOTICE", "../assets/echarts-NOTICE.txt");
copyFileSync("node_modules/zrender/LICENSE", "../assets/zrender-LICENSE.txt");
console.log(`${out}: ${script.length} bytes, sha256 ${sum}`);
