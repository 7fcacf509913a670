import fs from 'node:fs';
import { parseFixture, withFault } from './fixtures';
import { Judge } from './judge';
import { checkText } from './check';
let bad = 0;
for (const file of process.argv.slice(2)) {
  const text = fs.readFileSync(file, 'utf8');
  const fixture = parseFixture('python/adv.py', text);
  for (const section of fixture.sections) {
    for (const fault of [undefined, ...section.faults]) {
      const body = fault ? withFault(fixture, fault) : text;
      const r = await checkText('python/adv.py', body);
      let truth: any[] = []; let err = '';
      if (section.run.length) try { truth = await new Judge(fixture, section).judgePython(body); } catch (e) { err = String(e); }
      const fn = /def (\w+)/.exec(text.slice(text.indexOf('@visviva', section.start)))?.[1];
      const claims = r.claims.filter((c) => c.line >= section.startLine && c.line < section.endLine);
      if (claims.length === 0) console.log('?? no claims', section.name, fn, r.problems.map((p) => p.message).join('; '));
      for (const c of claims) {
        const j = truth.find((x) => x.output.replace(/\s/g, '') === c.output.replace(/\s/g, ''));
        const real = err ? 'error' : j ? (Number.isFinite(j.worst) ? (j.holds ? 'holds' : 'differs') : 'nan') : 'n/a';
        const flag = c.verdict === 'unread' ? 'unread' : real === c.verdict ? 'ok' : real === 'n/a' ? '--' : 'WRONG';
        if (flag === 'WRONG') bad++;
        if (process.env.ALL || flag !== 'ok') console.log(flag.padEnd(7), (fn + (fault ? '/' + fault.name : '')).padEnd(24), c.output.padEnd(10), c.verdict, '| real', real, err.slice(0, 90), '|', c.verdict === 'holds' ? '' : c.findings[0]?.message.slice(0, 200));
      }
    }
  }
}
console.log('WRONG:', bad);
process.exit(0);
