"""How the page looks: on screen, in the dark, on paper. Figures always stand on a white card."""

CSS = """
:root { color-scheme: light dark; --bar: 3rem;
  --paper: light-dark(#fbfaf7, #171a1e); --ink: light-dark(#1c2127, #e6e3dc);
  --soft: light-dark(#59626c, #a6adb5); --line: light-dark(#d9d6ce, #383d44);
  --tint: light-dark(#f1efe8, #20242a); --sound: light-dark(#00594a, #6fd3b8);
  --refine: light-dark(#7a4a00, #f0b860); --singular: light-dark(#9c2f00, #ff9a6b);
  --unproven: light-dark(#4a4f57, #b9c0c8); --focus: light-dark(#1d5f91, #8cc4f0); }
:root[data-scheme=light] { color-scheme: light; } :root[data-scheme=dark] { color-scheme: dark; }
* { box-sizing: border-box; } [hidden] { display: none !important; }
@media (prefers-reduced-motion: no-preference) { html { scroll-behavior: smooth; } }
body { margin: 0; background: var(--paper); color: var(--ink); line-height: 1.55;
  font-family: Charter, "Bitstream Charter", "Sitka Text", Cambria, Georgia, serif; font-size: 17px; }
nav, th, td, caption, figcaption, .verdict, summary, header p.about, .controls, .axis, button, .skip, .hint
  { font-family: "Gill Sans", "Gill Sans MT", Candara, Calibri, Ubuntu, "DejaVu Sans", sans-serif; }
:focus-visible { outline: 3px solid var(--focus); outline-offset: 2px; }
main { max-width: 66rem; margin: 0 auto; padding: 1.5rem 1.25rem 5rem; }
.skip { position: absolute; left: -99rem; z-index: 4; padding: .3rem .6rem; background: var(--paper); }
.skip:focus { left: .5rem; top: .5rem; }
.side { display: contents; }
nav { position: sticky; top: 0; z-index: 2; background: var(--paper); border-bottom: 1px solid var(--line);
  overflow-x: auto; font-size: .85rem; }
nav ul { list-style: none; margin: 0; padding: 0; }
nav > ul { display: flex; gap: 1.3rem; margin: 0 auto; padding: .55rem 1.25rem; max-width: 66rem;
  white-space: nowrap; }
nav ul ul { display: none; }
a { color: inherit; text-decoration-color: var(--soft); text-underline-offset: .2em; }
nav a { text-decoration: none; } nav a:hover { text-decoration: underline; }
nav a:focus-visible { outline-offset: -2px; }
nav a[aria-current] { box-shadow: 0 3px 0 -1px var(--ink); }
.controls { display: flex; flex-wrap: wrap; gap: .5rem 1.3rem; align-items: center; max-width: 66rem;
  margin: 0 auto; padding: .6rem 1.25rem 0; font-size: .8rem; color: var(--soft); }
.controls p { margin: 0; max-width: none; }
.note { display: flex; flex-wrap: wrap; gap: .35rem .8rem; align-items: center; color: var(--ink); }
[role=group]:has(> button) { display: flex; flex-wrap: wrap; gap: .35rem; align-items: center; }
.axis { font-size: .8rem; color: var(--soft); margin: 1.2rem 0 .6rem; }
button { font-size: .8rem; min-height: 1.5rem; padding: 0 .6rem; cursor: pointer; color: var(--ink);
  background: none; border: 1px solid var(--soft); border-radius: 3px; }
button[aria-pressed=true]:not(.verdict) { background: var(--ink); border-color: var(--ink);
  color: var(--paper); }
button.verdict[aria-pressed=false] { color: var(--soft); border-color: var(--line);
  text-decoration: line-through; }
.count { font-weight: 400; }
kbd { font: inherit; font-weight: 600; color: var(--ink); border-bottom: 2px solid var(--line);
  padding: 0 .15em; }
h1 { font-size: 2rem; line-height: 1.2; margin: 1rem 0 .2rem; font-weight: 600; text-wrap: balance;
  overflow-wrap: anywhere; }
h2 { font-size: 1.35rem; margin: 3rem 0 .8rem; padding-top: .9rem; border-top: 3px double var(--line); }
h3 { font-size: 1.1rem; margin: 2.2rem 0 .5rem; overflow-wrap: anywhere; }
[id], h2, h3 { scroll-margin-top: var(--bar); } h3 .verdict { margin-left: .6rem; }
p, li { max-width: 46rem; overflow-wrap: anywhere; }
header p.about { color: var(--soft); font-size: .9rem; margin: 0; }
p.overall { font-size: 1.2rem; border-left: 5px solid var(--ink); padding-left: 1rem; margin: 1.2rem 0; }
blockquote p { margin: 0; }
blockquote { margin: 1rem 0; padding: .1rem 0 .1rem 1rem; border-left: 2px solid var(--line); }
.scroll { overflow-x: auto; margin: 1rem 0; container-type: inline-size; }
table { border-collapse: collapse; font-size: .88rem; font-variant-numeric: tabular-nums; }
caption { text-align: left; color: var(--soft); padding-bottom: .35rem; }
caption > span { display: block; position: sticky; left: 0; width: fit-content; max-width: 100cqi;
  overflow-wrap: anywhere; }
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
table.statement tbody th, table.matrix tbody th { min-width: 9.5rem; max-width: 22rem;
  overflow-wrap: anywhere; }
.verdict { display: inline-block; padding: 0 .55rem; border: 2px solid; border-radius: 3px; font-size: .82rem;
  font-weight: 700; letter-spacing: .03em; vertical-align: .1em; white-space: nowrap; }
.sound { color: var(--sound); } .refine { color: var(--refine); border-style: dashed; }
.singular { color: var(--singular); border-style: double; border-width: 4px; }
.unproven { color: var(--unproven); border-style: dotted; }
.long { display: inline-block; min-width: 10rem; white-space: normal; overflow-wrap: anywhere; }
.pictures { display: grid; gap: 1.2rem;
  grid-template-columns: repeat(auto-fit, minmax(min(100%, 25rem), 1fr)); }
figure { margin: 1rem 0; min-width: 0; } .pictures figure { margin: 0; }
.card { background: #fff; border: 1px solid var(--line); border-radius: 4px; padding: .5rem; }
.card svg { display: block; width: 100%; height: auto; }
.card path, .card use, .card image { pointer-events: none; }
.level { outline: none; } .ring { fill: transparent; stroke-width: 1.6; }
.level:hover .ring, .level:focus .ring { stroke: #0072b2; }
.hint { position: fixed; z-index: 3; max-width: min(24rem, calc(100vw - 1rem)); padding: .25rem .6rem;
  border-radius: 3px; background: var(--ink); color: var(--paper); font-size: .8rem; pointer-events: none; }
figcaption { color: var(--soft); font-size: .86rem; margin-top: .4rem; max-width: 50rem; line-height: 1.45; }
.tiny { color: var(--soft); font-size: .86rem; }
.number { font-weight: 600; }
details { margin: .4rem 0; } summary { cursor: pointer; color: var(--soft); font-size: .9rem; }
pre { background: var(--tint); padding: .8rem 1rem; overflow-x: auto; font-size: .8rem; line-height: 1.4; }
@media screen { td a, tbody th a { display: inline-block; min-height: 1.5rem; line-height: 1.5rem; }
  .scroll { --shade: light-dark(#0000001c, #ffffff24); background:
    linear-gradient(to right, var(--paper) 50%, transparent) local,
    linear-gradient(to left, var(--paper) 50%, transparent) right local,
    linear-gradient(to right, var(--shade), transparent),
    linear-gradient(to left, var(--shade), transparent) right;
    background-size: 2rem 100%, 2rem 100%, .7rem 100%, .7rem 100%; background-repeat: no-repeat; }
  table:not([class]) td { white-space: nowrap; } table.words td:nth-child(n+3),
  table.methods td:last-child { min-width: 15rem; }
  .filtered, [data-axis=value] figure[data-axis=error],
  [data-axis=error] figure[data-axis=value] { display: none; }
  section:last-child { min-height: calc(100vh - var(--bar)); } }
@media screen and (max-width: 40rem) { table.words tbody th { min-width: 4.5rem; }
  table.words td:last-child { min-width: 11.5rem; }
  table.words td:nth-child(3):last-child { min-width: 7.5rem; } }
@media screen and (max-width: 83.99rem) { .note:has(button:not([hidden])) { position: fixed; z-index: 2;
  right: .5rem; bottom: .5rem; padding: .4rem .7rem; background: var(--paper); border-radius: 3px;
  border: 1px solid var(--soft); } }
@media screen and (max-width: 60rem) { table { font-size: .78rem; } th, td { padding-right: .6rem; } }
@media screen and (hover: none) and (pointer: coarse) { .keys, [data-switch=keys] { display: none; } }
@media screen and (min-width: 84rem) { :root { --bar: 1rem; }
  body { display: grid; grid-template-columns: 15rem minmax(0, 1fr); }
  .side { display: flex; flex-direction: column; position: sticky; top: 0; height: 100vh;
    border-right: 1px solid var(--line); }
  nav { flex: 1 1 auto; overflow: hidden auto; border: 0; padding: 1.2rem 0; }
  nav > ul { display: block; padding: 0 1.25rem; white-space: normal; } nav ul ul { display: block; }
  nav a { display: block; padding: .12rem 0 .12rem .7rem; border-left: 3px solid transparent;
    overflow-wrap: anywhere; }
  nav ul ul a { padding-left: 1.6rem; color: var(--soft); overflow: hidden; display: -webkit-box;
    -webkit-box-orient: vertical; -webkit-line-clamp: 2; }
  nav a[aria-current] { box-shadow: none; border-color: var(--ink); color: var(--ink); font-weight: 600; }
  .controls { flex-direction: column; align-items: stretch; gap: .6rem; margin: 0;
    padding: .9rem 1.25rem 1rem; border-top: 1px solid var(--line); }
  main { width: 100%; max-width: 78rem; padding: 1.5rem 2rem 5rem; } .pictures { max-width: 66rem; } }
@page { margin: 16mm 14mm 18mm; @bottom-right { content: counter(page); font-size: 8pt; } }
@media print { :root, :root[data-scheme] { color-scheme: light; }
  .side, .axis, .skip, .hint { display: none; } :focus-visible { outline: none; }
  html { font-size: 12px; } body { font-size: 10.5pt; background: #fff; color: #000; }
  main { max-width: none; padding: 0; }
  figure, tr, blockquote, table:not(.words) { break-inside: avoid; } h2, h3, caption { break-after: avoid; }
  h1, h2, h3 { break-inside: avoid; } details::details-content { content-visibility: visible; height: auto; }
  pre { white-space: pre-wrap; overflow-wrap: anywhere; }
  .pictures { grid-template-columns: 1fr 1fr; } .scroll { overflow: visible; }
  table { font-size: 7.5pt; } th, td { padding: .2rem .35rem; }
  tbody th, table.words td, table.matrix thead th { min-width: 4rem; overflow-wrap: anywhere; }
  table.matrix td, table.statement td, table.methods thead th { white-space: normal; }
  table.words td:last-child { min-width: 8rem; } .long { min-width: 5rem; } }
"""
