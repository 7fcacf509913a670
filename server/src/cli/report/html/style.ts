export const STYLE = `
:root { color-scheme: light dark; --page: #fbfaf7; --card: #ffffff; --ink: #22262b; --soft: #5b6470; --line: #d9d6ce;
  --well: #1d6b45; --wrong: #a3261f; --open: #7a5200; --declared: #1f5f8b; --code-back: #f1efe9; }
@media (prefers-color-scheme: dark) { :root { --page: #16191d; --card: #1e2227; --ink: #e4e2dc; --soft: #a3abb5; --line: #3a4048;
  --well: #74c79b; --wrong: #f08a80; --open: #e2b45c; --declared: #7fbce6; --code-back: #272c32; } }
* { box-sizing: border-box; }
body { margin: 0 auto; padding: 2rem 1.25rem 3rem; max-width: 62rem; background: var(--page); color: var(--ink);
  font: 16px/1.5 system-ui, "Segoe UI", "Helvetica Neue", Arial, sans-serif; }
h1 { font-size: 1.5rem; margin: 0 0 .25rem; }
h2 { font-size: 1.2rem; margin: 0; overflow-wrap: anywhere; }
h3 { font-size: 1rem; margin: 1.5rem 0 .5rem; }
p { margin: .5rem 0; }
code, pre { font-family: ui-monospace, "Cascadia Mono", Menlo, Consolas, monospace; font-size: .875em; }
code { background: var(--code-back); padding: .1em .3em; border-radius: 3px; overflow-wrap: anywhere; }
pre { background: var(--code-back); padding: .75rem; border-radius: 4px; overflow-x: auto; margin: .5rem 0; }
pre mark { background: none; color: inherit; text-decoration: underline wavy var(--wrong); text-underline-offset: .25em; }
table { border-collapse: collapse; margin: .5rem 0; width: 100%; }
table.narrow { width: auto; }
a { color: var(--declared); }
th, td { text-align: left; padding: .35rem .75rem .35rem 0; border-bottom: 1px solid var(--line); vertical-align: top; }
th { font-weight: 600; color: var(--soft); font-size: .875rem; }
td.number, th.number { text-align: right; font-variant-numeric: tabular-nums; white-space: nowrap; }
tr.sum td { font-weight: 600; border-bottom: 0; }
tr.blamed td { color: var(--wrong); }
.scroll { overflow-x: auto; }
.subtitle, .place, figcaption, footer { color: var(--soft); font-size: .9rem; }
.summary { font-size: 1.1rem; margin: 1rem 0; }
.card { background: var(--card); border: 1px solid var(--line); border-radius: 6px; padding: 1rem 1.25rem; margin: 1.25rem 0; }
.finding { border-top: 1px solid var(--line); margin-top: 1rem; padding-top: .75rem; }
.verdict { font-weight: 600; }
.holds { color: var(--well); } .differs, .error { color: var(--wrong); } .unread, .warning { color: var(--open); } .note, .accepted { color: var(--soft); }
.badge { border: 1px solid currentColor; border-radius: 3px; padding: 0 .4em; font-size: .85rem; font-weight: 600; white-space: nowrap; }
.letters { position: absolute; width: 0; height: 0; }
.math svg { vertical-align: middle; max-width: none; }
.math.display { display: block; margin: .5rem 0; overflow-x: auto; }
details { margin: .75rem 0; } summary { cursor: pointer; font-weight: 600; }
figure { margin: .75rem 0; }
svg.plot { max-width: 100%; height: auto; display: block; }
.plot text { fill: var(--soft); font-size: 12px; font-family: inherit; }
.plot .grid { stroke: var(--line); stroke-width: 1; }
.plot path { fill: none; stroke-width: 2; }
.plot .expected { stroke: var(--declared); } .plot .found { stroke: var(--wrong); stroke-dasharray: 6 4; }
.plot .witness { stroke: var(--soft); stroke-dasharray: 2 3; }
.key::before { content: ""; display: inline-block; width: 1.5rem; border-top: 2px solid; vertical-align: middle; margin-right: .35rem; }
.key { margin-right: 1rem; } .key.expected::before { border-color: var(--declared); } .key.found::before { border-color: var(--wrong); border-top-style: dashed; }
.key.witness::before { border-color: var(--soft); border-top-style: dotted; }
footer { margin-top: 2rem; border-top: 1px solid var(--line); padding-top: .75rem; }
@media print { body { max-width: none; } .card { break-inside: avoid; } }
`;
