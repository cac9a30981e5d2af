"""How the page looks: on screen, in the dark, on paper. Figures always stand on a white card."""

CSS = """
:root { color-scheme: light dark; --paper: #fbfaf7; --ink: #1c2127; --soft: #59626c; --line: #d9d6ce;
  --tint: #f1efe8; --sound: #00594a; --refine: #7a4a00; --singular: #9c2f00; --unproven: #4a4f57; }
@media (prefers-color-scheme: dark) { :root { --paper: #171a1e; --ink: #e6e3dc; --soft: #a6adb5;
  --line: #383d44; --tint: #20242a; --sound: #6fd3b8; --refine: #f0b860; --singular: #ff9a6b;
  --unproven: #b9c0c8; } }
* { box-sizing: border-box; }
html { scroll-behavior: smooth; }
body { margin: 0; background: var(--paper); color: var(--ink); line-height: 1.55;
  font-family: Charter, "Bitstream Charter", "Sitka Text", Cambria, Georgia, serif; font-size: 17px; }
nav, th, td, caption, figcaption, .verdict, .facts, summary, header p.about
  { font-family: "Gill Sans", "Gill Sans MT", Candara, Calibri, Ubuntu, "DejaVu Sans", sans-serif; }
main { max-width: 66rem; margin: 0 auto; padding: 1.5rem 1.25rem 5rem; }
nav { position: sticky; top: 0; z-index: 2; background: var(--paper); border-bottom: 1px solid var(--line);
  overflow-x: auto; }
nav ul { display: flex; gap: 1.3rem; list-style: none; margin: 0 auto; padding: .55rem 1.25rem;
  max-width: 66rem; white-space: nowrap; font-size: .85rem; }
a { color: inherit; text-decoration-color: var(--soft); text-underline-offset: .2em; }
nav a { text-decoration: none; } nav a:hover, nav a:focus { text-decoration: underline; }
h1 { font-size: 2rem; line-height: 1.2; margin: 1rem 0 .2rem; font-weight: 600; text-wrap: balance; }
h2 { font-size: 1.35rem; margin: 3rem 0 .8rem; padding-top: .9rem; border-top: 3px double var(--line); }
h3 { font-size: 1.1rem; margin: 2.2rem 0 .5rem; overflow-wrap: anywhere; }
section { scroll-margin-top: 2.5rem; } h3 .verdict { margin-left: .6rem; }
p, li { max-width: 46rem; overflow-wrap: anywhere; }
header p.about { color: var(--soft); font-size: .9rem; margin: 0; }
p.overall { font-size: 1.2rem; border-left: 5px solid var(--ink); padding-left: 1rem; margin: 1.2rem 0; }
blockquote p { margin: 0; }
blockquote { margin: 1rem 0; padding: .1rem 0 .1rem 1rem; border-left: 2px solid var(--line); }
.scroll { overflow-x: auto; margin: 1rem 0; }
table { border-collapse: collapse; font-size: .88rem; font-variant-numeric: tabular-nums; }
caption { text-align: left; color: var(--soft); padding-bottom: .35rem; }
th, td { padding: .3rem .85rem .3rem 0; border-bottom: 1px solid var(--line); text-align: right;
  vertical-align: top; }
thead th { color: var(--soft); font-weight: 600; border-bottom: 2px solid var(--line);
  vertical-align: bottom; }
th:first-child { text-align: left; } tbody th { font-weight: 600; }
table.words td, table.words th { text-align: left; }
table.words tbody th { min-width: 8rem; max-width: 20rem; overflow-wrap: anywhere; }
table.words td:last-child { min-width: 15rem; }
table.methods thead th { white-space: nowrap; }
table.methods td:last-child, table.methods th:last-child { text-align: left; }
table.matrix td, table.matrix th { text-align: left; }
table.matrix td, table.statement td { white-space: nowrap; }
table.statement tbody th { min-width: 8rem; max-width: 22rem; overflow-wrap: anywhere; }
.verdict { display: inline-block; padding: 0 .55rem; border: 2px solid; border-radius: 3px; font-size: .82rem;
  font-weight: 700; letter-spacing: .03em; vertical-align: .1em; }
.sound { color: var(--sound); } .refine { color: var(--refine); border-style: dashed; }
.singular { color: var(--singular); border-style: double; border-width: 4px; }
.unproven { color: var(--unproven); border-style: dotted; }
.pictures { display: grid; gap: 1.2rem;
  grid-template-columns: repeat(auto-fit, minmax(min(100%, 25rem), 1fr)); }
figure { margin: 1rem 0; min-width: 0; } .pictures figure { margin: 0; }
.card { background: #fff; border: 1px solid var(--line); border-radius: 4px; padding: .5rem; }
.card svg { display: block; width: 100%; height: auto; }
figcaption { color: var(--soft); font-size: .86rem; margin-top: .4rem; max-width: 50rem; line-height: 1.45; }
.tiny { color: var(--soft); font-size: .86rem; }
details { margin: .4rem 0; } summary { cursor: pointer; color: var(--soft); font-size: .9rem; }
pre { background: var(--tint); padding: .8rem 1rem; overflow-x: auto; font-size: .8rem; line-height: 1.4; }
@media print { nav { display: none; } body { font-size: 10.5pt; background: #fff; color: #000; }
  main { max-width: none; padding: 0; } figure, tr, blockquote { break-inside: avoid; }
  h2, h3 { break-after: avoid; } pre { white-space: pre-wrap; }
  .pictures { grid-template-columns: 1fr 1fr; } .scroll { overflow: visible; }
  table { font-size: 7.5pt; } th, td { padding: 0.2rem 0.35rem; } }
"""
