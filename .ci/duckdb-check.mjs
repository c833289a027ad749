// Opens the tables of a run in DuckDB and compares them with what bendtest exports.
//   node duckdb-check.mjs DIR BENDTEST
// Needs the npm package @duckdb/node-api beside it.
import { execFileSync } from "node:child_process";
import { DuckDBInstance } from "@duckdb/node-api";

const [dir, bendtest] = process.argv.slice(2);
const tables = [
  "cells", "fits", "picks", "summary", "choices", "differences", "rungs", "curves", "tests", "audit", "verdict", "timings", "columns",
];
const db = await (await DuckDBInstance.create(":memory:")).connect();
let faults = 0;
const fault = (text) => {
  console.error("FAULT", text);
  faults++;
};
const rows = async (sql) => (await db.runAndReadAll(sql)).getRowObjectsJS();

// The exports as JSON lines; infinities are strings there.
const exported = (table) =>
  execFileSync(bendtest, ["export", dir, table, "--format", "json"], { maxBuffer: 1 << 30 })
    .toString()
    .trim()
    .split("\n")
    .map((line) => JSON.parse(line));
const same = (a, b) => {
  if (typeof a === "bigint") a = Number(a);
  if (b === "inf") b = Infinity;
  if (b === "-inf") b = -Infinity;
  return a === b || (a === null && b === null);
};

for (const table of tables) {
  const file = `'${dir}/tables/${table}.parquet'`;
  const there = await rows(`select * from read_parquet(${file})`);
  const want = exported(table);
  if (there.length !== want.length) fault(`${table}: ${there.length} rows, exported ${want.length}`);
  let nulls = 0;
  let infinite = 0;
  for (let i = 0; i < Math.min(there.length, want.length); i++) {
    for (const column of Object.keys(want[i])) {
      if (!same(there[i][column], want[i][column])) {
        fault(`${table} row ${i} ${column}: ${there[i][column]}, exported ${want[i][column]}`);
        if (faults > 20) process.exit(1);
      }
      if (there[i][column] === null) nulls++;
      if ([Infinity, -Infinity].includes(there[i][column])) infinite++;
    }
  }
  // Descriptions and units, from the metadata of the Parquet file itself.
  const meta = await rows(
    `select decode(value) as text from parquet_kv_metadata(${file}) where decode(key) = 'bendtest.columns'`,
  );
  const docs = JSON.parse(meta[0].text);
  for (const column of Object.keys(there[0])) {
    if (!docs[column]?.description) fault(`${table}.${column} has no description in the file`);
  }
  console.log(`${table}: ${there.length} rows, ${nulls} nulls, ${infinite} infinite, ${Object.keys(docs).length} columns described`);
}

// The table columns carries the same to readers that do not look at metadata.
const undocumented = await rows(
  `select count(*) as n from read_parquet('${dir}/tables/columns.parquet') where description = '' or type = ''`,
);
if (Number(undocumented[0].n) !== 0) fault("columns without a description");

// One figure of the summary from the picks, worked by DuckDB.
const means = await rows(`
  select s.cell, s.smoother, s.rule, s.value, p.mean
  from read_parquet('${dir}/tables/summary.parquet') s
  join (select cell, smoother, rule, avg(regret) as mean from read_parquet('${dir}/tables/picks.parquet')
        where regret is not null group by all) p using (cell, smoother, rule)
  where s.measure = 'mean_regret'`);
if (means.length === 0) fault("no means to compare");
for (const m of means) {
  if (Math.abs(m.value - m.mean) > 1e-12 * Math.abs(m.mean)) fault(`mean regret ${m.cell} ${m.smoother} ${m.rule}: ${m.value}, DuckDB ${m.mean}`);
}
console.log(`${means.length} mean regrets agree`);

// Means over replicates and counts of rejections from the fits, likewise.
const rungs = await rows(`
  select r.cell, r.smoother, r.df, r.quantity, r.mean as value, f.mean
  from read_parquet('${dir}/tables/rungs.parquet') r
  join (select cell, smoother, df, avg(heldout_mse) as heldout, avg(loocv) as loocv, avg(coverage) as coverage
        from read_parquet('${dir}/tables/fits.parquet') group by all)
       unpivot (mean for quantity in (heldout, loocv, coverage)) f using (cell, smoother, df, quantity)`);
if (rungs.length === 0) fault("no rungs to compare");
for (const r of rungs) {
  if (Math.abs(r.value - r.mean) > 1e-12 * Math.abs(r.mean)) fault(`${r.quantity} of ${r.cell} ${r.smoother} ${r.df}: ${r.value}, DuckDB ${r.mean}`);
}
const tests = await rows(`
  select t.cell, t.smoother, t.df, t.alpha, t.rejected, t.replicates, f.rejected as count, f.tested
  from read_parquet('${dir}/tables/tests.parquet') t
  join (select cell, smoother, df, alpha, count(*) filter (line_p <= alpha) as rejected, count(line_p) as tested
        from read_parquet('${dir}/tables/fits.parquet'), (values (0.1), (0.05), (0.01)) levels(alpha) group by all) f
  using (cell, smoother, df, alpha)`);
if (tests.length === 0) fault("no tests to compare");
for (const t of tests) {
  if (Number(t.rejected) !== Number(t.count) || Number(t.replicates) !== Number(t.tested)) fault(`test ${t.cell} ${t.smoother} ${t.df} ${t.alpha}: ${t.rejected} of ${t.replicates}, DuckDB ${t.count} of ${t.tested}`);
}
console.log(`${rungs.length} means of rungs and ${tests.length} tests agree`);
if (faults > 0) process.exit(1);
console.log("1 passed, 0 failed");
