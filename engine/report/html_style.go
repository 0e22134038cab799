package report

// style is the page's style sheet. Every ink has a hue for a light ground and
// one for a dark ground, each with a contrast of at least 4.5 to its ground;
// paper is light.
const style = `
:root{color-scheme:light dark;--ground:#ffffff;--ink:#1b1f24;--soft:#57606a;--faint:#c4cad1;--goal:#b4232a;--panel:#f5f7f9;
--s0:#0b5cad;--s1:#a8420f;--s2:#1a7a3c;--s3:#7b3fb8;--s4:#8a6100;--s5:#b0256f;--s6:#007078;--s7:#5a5f66}
@media (prefers-color-scheme:dark){:root{--ground:#14171b;--ink:#e4e8ec;--soft:#a3adb8;--faint:#454d56;--goal:#ff8a84;--panel:#1d2126;
--s0:#74b4ff;--s1:#ff9c70;--s2:#62d08a;--s3:#c79dff;--s4:#e6b84a;--s5:#ff8cc2;--s6:#52cfd8;--s7:#b4bac2}}
*{box-sizing:border-box}
body{margin:0 auto;padding:1.2rem 1.2rem 3rem;max-width:72rem;background:var(--ground);color:var(--ink);font:15px/1.5 "Liberation Sans",Arial,Helvetica,sans-serif}
h1{font-size:1.5rem;line-height:1.25;margin:.4rem 0 1rem;overflow-wrap:anywhere}
h2{font-size:1.15rem;margin:2.2rem 0 .7rem;padding-top:.7rem;border-top:1px solid var(--faint)}
h3{font-size:1rem;margin:1.4rem 0 .4rem}
p,li,dd,figcaption{overflow-wrap:anywhere}
ul{margin:.3rem 0;padding-left:1.3rem}
code,.id{font-family:"Liberation Mono",Consolas,Menlo,monospace;font-size:.9em}
dl.head{display:grid;grid-template-columns:8rem minmax(0,1fr);gap:.35rem .8rem;margin:0;padding:.9rem 1rem;background:var(--panel);border:1px solid var(--faint);border-radius:6px}
dl.head dt{font-weight:700;color:var(--soft);font-size:.85em;padding-top:.12rem}
dl.head dd{margin:0}
.wide{overflow-x:auto;margin:.5rem 0}
table{border-collapse:collapse;font-size:.9em;min-width:100%}
th,td{text-align:left;vertical-align:top;padding:.28rem .7rem .28rem 0;border-bottom:1px solid var(--faint)}
th{font-weight:600;color:var(--soft);vertical-align:bottom}
td.n,th.n{text-align:right;font-variant-numeric:tabular-nums}
td.n{white-space:nowrap}
td.remark{border-bottom:1px solid var(--faint);color:var(--soft);font-size:.92em;padding-top:0}
td.remark div{position:sticky;left:0;max-width:min(60rem,88vw)}
tr:has(+tr>td.remark)>td{border-bottom:0}
td code{white-space:nowrap}
table.items td:first-child{white-space:nowrap;color:var(--soft)}
table.items{font-size:.92em}
figure{margin:.8rem 0}
figcaption{color:var(--soft);font-size:.85em;margin-top:.25rem}
svg{display:block;width:100%;height:auto;fill:var(--ink);font-family:"Liberation Sans",Arial,Helvetica,sans-serif}
svg.narrow{display:none}
.many{display:grid;grid-template-columns:repeat(auto-fill,minmax(min(22rem,100%),1fr));gap:.2rem 1.6rem}
.many figure{margin:.6rem 0}
.finding{margin:.8rem 0;padding:.1rem 0 .1rem .9rem;border-left:4px solid var(--faint)}
.finding.blocker{border-color:var(--goal)}
.finding.drag{border-color:var(--s4)}
.finding p{margin:.15rem 0}
.finding .small,.small{color:var(--soft);font-size:.88em}
.tag{font-weight:700}
.blocker .tag{color:var(--goal)}
.drag .tag{color:var(--s4)}
.s0{color:var(--s0)}.s1{color:var(--s1)}.s2{color:var(--s2)}.s3{color:var(--s3)}.s4{color:var(--s4)}.s5{color:var(--s5)}.s6{color:var(--s6)}.s7{color:var(--s7)}
.key{font-weight:700}
summary{cursor:pointer;color:var(--soft)}
@media (max-width:600px){body{padding:.6rem .7rem 2rem;font-size:14px}svg.broad{display:none}svg.narrow{display:block}
dl.head{grid-template-columns:minmax(0,1fr);gap:.1rem}dl.head dd{margin-bottom:.4rem}}
@media print{:root{color-scheme:light;--ground:#ffffff;--ink:#000000;--soft:#444c55;--faint:#b5bcc4;--goal:#a01820;--panel:#ffffff;
--s0:#0b5cad;--s1:#a8420f;--s2:#1a7a3c;--s3:#7b3fb8;--s4:#8a6100;--s5:#b0256f;--s6:#007078;--s7:#5a5f66}
body{max-width:none;padding:0;font-size:10pt}svg.broad{display:block}svg.narrow{display:none}.wide{overflow:visible}
details{display:none}figure,.finding,tr,dl.head{break-inside:avoid}h2,h3{break-after:avoid}thead{display:table-header-group}
table{font-size:7.5pt}th,td{padding-right:.35rem}td code{white-space:normal;overflow-wrap:anywhere}.many{grid-template-columns:1fr 1fr}
@page{margin:14mm}}
`
