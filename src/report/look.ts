/** The look of answer card, figures and tables, in notebooks and pages alike, as one style sheet. */
import { palette } from '../figures/palette';

/**
 * Rules for what carries a class starting with `sb-`; nothing else on the page is touched. Sizes are in em, because
 * older notebooks set a rem of 10 pixels.
 */
export const componentStyle: string = `
.sb-card { --edge: ${palette.faint}; border: 1px solid #d9d5cb; border-left: 6px solid var(--edge); border-radius: 4px;
  padding: 1.1em 1.4em; margin: 0 0 1.5em; background: ${palette.paper}; color: ${palette.ink}; }
.sb-repair { --edge: ${palette.op}; } .sb-retune { --edge: ${palette.travel}; } .sb-look-outside { --edge: ${palette.pv}; }
.sb-get-better-data { --edge: ${palette.stampEdge}; }
.sb-card h2 { font-size: 1.45em; line-height: 1.25; margin: .35em 0 .4em; }
.sb-card h3 { font-size: .95em; margin: 0 0 .3em; color: ${palette.ink}; }
.sb-card p, .sb-card ul { margin: 0 0 .5em; } .sb-card ul { padding-left: 1.15em; } .sb-card li { margin-bottom: .25em; }
.sb-kicker { font-size: .95em; color: ${palette.faint}; }
.sb-chip { display: inline-block; padding: .05em .6em; margin-right: .4em; border: 2px solid var(--edge);
  border-radius: 3px; color: ${palette.ink}; font-weight: 600; }
.sb-cause { font-size: 1.08em; }
.sb-part { margin-top: .9em; }
.sb-columns { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(20em, 100%), 1fr)); gap: 0 2em; }
.sb-card table.sb-tiles { display: block; width: 100%; margin: .9em 0 0; border: 0; }
.sb-tiles tbody { display: flex; flex-wrap: wrap; gap: 1px; }
.sb-card .sb-tiles tr { display: block; flex: 1 1 13em; background: #f7f5f0; padding: .5em .7em; }
.sb-card .sb-tiles th, .sb-card .sb-tiles td { display: block; padding: 0; border: 0; text-align: left; background: none; }
.sb-card .sb-tiles th { font-size: .82em; font-weight: 400; color: ${palette.faint}; }
.sb-card .sb-tiles .sb-value { font-size: 1.12em; font-weight: 600; color: ${palette.ink}; }
.sb-card .sb-tiles .sb-note { font-size: .82em; color: ${palette.faint}; }
.sb-card blockquote { font-size: inherit; overflow-wrap: anywhere; margin: 0; padding: .6em .8em; background: #f7f5f0;
  border: 1px dashed #b9b3a5; color: ${palette.ink}; }
.sb-caution, .sb-cautions { background: ${palette.stampGround}; border-left: 3px solid ${palette.stampEdge}; padding: .5em .8em; }
.sb-card .sb-caution, .sb-steps .sb-caution { margin: 0; } .sb-steps li { margin-bottom: 1em; max-width: 46em; } .sb-steps p { margin: 0 0 .4em; } .sb-cautions ul:last-child { margin: 0; }
.sb-card table.sb-signatures, .sb-signatures tbody { display: block; width: 100%; border: 0; color: ${palette.faint}; }
.sb-signatures tr { display: flex; flex-wrap: wrap; gap: .2em .6em; margin-top: 1.2em; background: none; }
.sb-card .sb-signatures th { font-size: .85em; font-weight: 400; padding: 0; border: 0; }
.sb-card .sb-signatures td { flex: 1 1 11em; border: 0; border-bottom: 1px solid ${palette.faint}; height: 1.4em; }
.sb-row { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(24em, 100%), 1fr)); gap: 0 1em; }
.sb-figure { margin: 0 0 1.2em; min-width: 0; color: ${palette.ink}; background: ${palette.paper}; border: 1px solid ${palette.grid}; }
.sb-figure figcaption { font-size: .92em; color: ${palette.faint}; max-width: 48em; padding: .2em .8em .7em; }
.sb-plot { display: none; width: 100%; } .sb-drawn .sb-plot { display: block; }
.sb-picture { max-width: 100%; height: auto; } .sb-shown .sb-picture { display: none; }
.sb-table { overflow-x: auto; margin: 0 0 1.2em; }
.sb-table table { border-collapse: collapse; font-size: .9em; color: ${palette.ink}; }
.sb-table table caption { text-align: left; padding-bottom: .3em; white-space: nowrap; }
.sb-table table th, .sb-table table td { text-align: left; vertical-align: top; padding: .25em .9em .25em 0; border: 0;
  border-bottom: 1px solid ${palette.grid}; background: none; max-width: 32em; }
.sb-table thead th { border-bottom: 1px solid ${palette.faint}; font-weight: 600; }
.sb-table table td { overflow-wrap: break-word; }
.sb-table table .sb-number { text-align: right; font-variant-numeric: tabular-nums; }
.sb-unit { --edge: ${palette.ink}; } .sb-unit ol { margin: 0 0 .5em; padding-left: 1.4em; } .sb-unit a, .sb-whole a { color: inherit; }
.sb-ranked { container-type: inline-size; background: ${palette.paper}; } .sb-ranked table { width: 100%; border-collapse: collapse; }
.sb-table.sb-ranked table th, .sb-table.sb-ranked table td { padding: .35em .7em .35em 0; } .sb-ranked > table > tbody > tr > td { white-space: nowrap; }
.sb-table.sb-ranked > table > thead th:first-child, .sb-table.sb-ranked > table > tbody > tr:first-child > td:first-child { padding-left: .6em; }
.sb-ranked .sb-note { font-size: .88em; color: ${palette.faint}; }
.sb-ranked thead th { vertical-align: bottom; } .sb-ranked th button { all: unset; cursor: pointer; font-weight: 600; border-bottom: 1px dotted ${palette.faint}; }
.sb-ranked th button:focus-visible { outline: 2px solid ${palette.pv}; } .sb-ranked th[aria-sort] button { border-bottom-style: solid; }
.sb-ranked th[aria-sort="descending"] button::after { content: " \\2193"; } .sb-ranked th[aria-sort="ascending"] button::after { content: " \\2191"; }
.sb-table.sb-ranked > table > tbody > tr:first-child > td { border-bottom: 0; padding-bottom: 0; }
.sb-table.sb-ranked > table > tbody > .sb-more > td { max-width: none; padding: 0 .6em .6em; border-bottom: 1px solid ${palette.grid}; white-space: normal; }
.sb-more > td > details { position: sticky; left: .6em; max-width: 90vw; max-width: calc(100cqi - 1.2em); } .sb-more summary { cursor: pointer; }
.sb-whole { scroll-margin-top: 8em; margin: .6em 0; padding: .7em 1em; background: #f7f5f0; overflow-wrap: anywhere; white-space: normal; }
.sb-whole h3, .sb-whole h4 { font-size: 1em; margin: 0 0 .3em; } .sb-whole h3 { font-size: 1.12em; margin-bottom: .6em; }
.sb-whole p, .sb-whole ul, .sb-whole ol { margin: 0 0 .5em; } .sb-whole ul, .sb-whole ol { padding-left: 1.15em; } .sb-whole li { margin-bottom: .25em; }
.sb-whole blockquote { font-size: inherit; margin: 0; padding: .6em .8em; border: 1px dashed #b9b3a5; background: ${palette.paper}; }
.sb-cycles { display: block; width: 10.5em; max-width: none; height: auto; background: ${palette.paper}; }
.sb-whole .sb-cycles { width: 100%; max-width: 32em; } .sb-whole table.sb-figures { width: auto; font-size: 1em; margin: .5em 0; }
.sb-table.sb-ranked table.sb-figures th, .sb-table.sb-ranked table.sb-figures td { padding: .1em .9em .1em 0; border: 0; font-weight: 400; white-space: normal; }
.sb-table.sb-ranked table.sb-figures th { color: ${palette.faint}; white-space: nowrap; }
.sb-folded { margin: 0 0 1em; } .sb-folded summary { cursor: pointer; margin-bottom: .4em; }
@media screen and (max-width: 600px) {
  .sb-wide table, .sb-wide tbody, .sb-wide tr, .sb-wide td { display: block; } .sb-wide thead { display: none; }
  .sb-wide tr { border-bottom: 1px solid ${palette.faint}; padding: .4em 0; }
  .sb-table.sb-wide table td { border: 0; padding: 0; text-align: left; } .sb-wide td:first-child { font-weight: 600; }
  .sb-ranked > table > tbody > tr:first-child > td:nth-child(2) { position: sticky; left: 0; padding-left: .6em; background: ${palette.paper}; }
  .sb-wide td + td::before { content: attr(data-column) ": "; color: ${palette.faint}; } .sb-wide td:empty { display: none; }
}
@media print {
  .sb-card { border-radius: 0; } .sb-figure, .sb-part, .sb-table tr { break-inside: avoid; }
  .sb-folded::details-content { content-visibility: visible; }
  .sb-plot, .sb-drawn .sb-plot { display: none; } .sb-shown .sb-picture, .sb-picture { display: block; }
}
`.trim();

/** Rules for a whole page; those of the components come with the set-up cell of the notebook on it. */
export const pageStyle: string = `
* { box-sizing: border-box; }
html { -webkit-text-size-adjust: 100%; }
body { margin: 0; background: #fbfaf7; color: ${palette.ink}; font: 16px/1.5 system-ui, sans-serif; }
main { max-width: 66rem; margin: 0 auto; padding: 1.1rem 1.2rem 3rem; }
main > * { max-width: 100%; }
h1 { font-size: 1.15rem; font-weight: 600; margin: 0 0 .7rem; color: ${palette.faint}; }
.text h2 { font-size: 1.35rem; margin: 2.2rem 0 .5rem; padding-top: .6rem; border-top: 1px solid #d9d5cb; }
.text h3 { font-size: 1.08rem; margin: 1.4rem 0 .4rem; }
.text p, .text ul, .text ol, .text table { max-width: 46rem; } .text p { margin: 0 0 .7rem; }
.text code { font-size: .9em; background: #f1eee6; padding: 0 .25em; border-radius: 2px; }
.text table { border-collapse: collapse; } .text th, .text td { text-align: left; padding: .2rem .9rem .2rem 0; border-bottom: 1px solid ${palette.grid}; }
.printed { white-space: pre-wrap; overflow-wrap: anywhere; font: .85rem/1.45 ui-monospace, monospace; margin: 0 0 1rem; }
details.code { margin: -.4rem 0 1.2rem; font-size: .8rem; color: ${palette.faint}; }
details.code summary { cursor: pointer; width: max-content; }
details.code pre { overflow-x: auto; background: #f1eee6; color: ${palette.ink}; padding: .7rem .9rem; margin: .4rem 0 0;
  font: .8rem/1.45 ui-monospace, monospace; }
footer { border-top: 1px solid #d9d5cb; margin-top: 2.5rem; padding-top: .8rem; font-size: .85rem; color: ${palette.faint}; }
@media (max-width: 480px) { main { padding: .7rem .7rem 2rem; } .sb-card { padding: .8rem .9rem; } .sb-card h2 { font-size: 1.25rem; } }
@page { size: A4; margin: 16mm 14mm; }
@media print {
  body { background: none; font-size: 10.5pt; } main { padding: 0; max-width: none; } details.code { display: none; }
  h2, h3 { break-after: avoid; }
}
`.trim();
