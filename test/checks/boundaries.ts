import { cruise, type IReporterOutput } from 'dependency-cruiser';
import extractDepcruiseOptions from 'dependency-cruiser/config-utl/extract-depcruise-options';
import extractTSConfig from 'dependency-cruiser/config-utl/extract-ts-config';

// Run by `npm run check:boundaries`. Fails on a broken rule, and also when nothing was cruised: a check that looked at no
// module would pass in silence.
const folders = ['analysis', 'main', 'renderer', 'fixtures', 'test'];
const options = await extractDepcruiseOptions('./.dependency-cruiser.cjs');
const report: IReporterOutput = await cruise(folders, options, undefined, {
  tsConfig: extractTSConfig('./tsconfig.json'),
});
if (typeof report.output === 'string') throw new Error('dependency-cruiser gave text, not its result');
const { totalCruised, violations } = report.output.summary;
for (const v of violations) console.error(`${v.rule.severity} ${v.rule.name}: ${v.from} → ${v.to}`);
const { modules } = report.output;
const empty = folders.filter((folder) => !modules.some((m) => m.source.startsWith(`${folder}/`)));
if (totalCruised === 0 || empty.length > 0) {
  console.error(
    `boundaries: no module cruised in ${empty.join(', ') || 'any folder'}: the check looked at nothing`,
  );
  process.exit(1);
}
if (violations.length > 0) process.exit(1);
console.log(`boundaries: ${totalCruised} modules cruised, no rule broken`);
