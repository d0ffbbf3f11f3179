/// Style sheet of the report: one column on a phone, two on a screen, A4 on paper; light and dark.
#pragma once

namespace falcate::post {

inline constexpr const char* report_style = R"CSS(
:root{--ink:#1c2127;--paper:#fff;--faint:#8b929b;--soft:#f3f4f2;--edge:#d9dcd8;--accent:#0b5cad;
--second:#b2491a;--third:#2f7d4f;--blade:#d5d8dc;--warn:#7a4b00;--warn-soft:#fff4dc;--quiet:#59616b}
@media (prefers-color-scheme:dark){:root{--ink:#e4e7ea;--paper:#15181c;--faint:#767e88;--soft:#1e2227;
--edge:#343a41;--accent:#6fb1f0;--second:#ef9a6c;--third:#7cc79b;--blade:#4a5058;--warn:#f1c878;
--warn-soft:#2e2616;--quiet:#a3abb4}}
*{box-sizing:border-box}
html{-webkit-text-size-adjust:100%}
body{margin:0 auto;max-width:68rem;padding:2rem clamp(1rem,4vw,3rem) 4rem;background:var(--paper);
color:var(--ink);font:1rem/1.55 system-ui,sans-serif;overflow-wrap:break-word}
header p{margin:0;color:var(--quiet);font-size:.9rem}
h1{font-size:clamp(1.4rem,4vw,2rem);line-height:1.2;margin:.2rem 0 .6rem;letter-spacing:-.01em}
h2{font-size:1.15rem;margin:2.8rem 0 .8rem;padding-top:.7rem;border-top:2px solid var(--ink)}
h3{font-size:1rem;margin:1.4rem 0 .4rem}
p{margin:.5rem 0;max-width:46rem}
.answer{font-size:clamp(1.1rem,2.6vw,1.35rem);line-height:1.45;margin:1.2rem 0 1.4rem;max-width:50rem}
.keys{display:grid;grid-template-columns:repeat(auto-fill,minmax(15rem,1fr));gap:.9rem;margin:0}
.keys div{border-left:4px solid var(--accent);background:var(--soft);padding:.65rem .9rem}
.keys dt{font-size:.85rem;color:var(--quiet)}
.keys dd{margin:0;font-size:1.3rem;font-variant-numeric:tabular-nums}
.keys dd.caution{font-size:.82rem;line-height:1.4;margin-top:.35rem}
.caution{color:var(--warn);background:var(--warn-soft);padding:.35rem .6rem;font-size:.9rem}
.caution::before{content:"\25B2\00A0"}
.cautions{margin:.5rem 0;padding:0;list-style:none;max-width:50rem}
.cautions li{margin:.4rem 0}
.failed{max-width:50rem}
.pair{display:grid;grid-template-columns:repeat(auto-fit,minmax(min(100%,25rem),1fr));
gap:1.2rem 2rem;align-items:start}
.many{display:grid;grid-template-columns:repeat(auto-fill,minmax(min(100%,18rem),1fr));gap:1rem 1.6rem}
figure{margin:.6rem 0}
figure svg{display:block;max-width:100%;height:auto}
figure.large svg{width:100%;max-width:40rem}
figcaption{font-size:.88rem;color:var(--quiet);margin-top:.3rem;max-width:40rem}
.scroll{overflow-x:auto;margin:.6rem 0 1.2rem}
table{border-collapse:collapse;font-size:.9rem;font-variant-numeric:tabular-nums}
th,td{padding:.28rem .8rem .28rem 0;text-align:left;vertical-align:top;border-bottom:1px solid var(--edge)}
tbody th{font-weight:400}
th i{color:var(--quiet);white-space:nowrap}
.figures td,.figures thead th+th{text-align:right;white-space:nowrap;padding-left:.8rem;padding-right:0}
.figures{width:100%}
.figures tbody th{min-width:11rem}
.derived th{color:var(--quiet);padding-right:1.6rem}
pre{background:var(--soft);padding:1rem;overflow-x:auto;font:.82rem/1.5 ui-monospace,monospace;
white-space:pre-wrap}
@page{size:A4;margin:15mm 14mm}
@media print{:root{--ink:#000;--paper:#fff;--faint:#777;--soft:#f3f4f2;--edge:#bbb;--accent:#0b5cad;
--second:#b2491a;--third:#2f7d4f;--blade:#d5d8dc;--warn:#5a3700;--warn-soft:#fff;--quiet:#444}
body{max-width:none;padding:0;font-size:9.5pt;-webkit-print-color-adjust:exact;print-color-adjust:exact}
.pair{grid-template-columns:1fr 1fr;gap:4mm}.many{grid-template-columns:repeat(3,1fr)}
.keys{grid-template-columns:repeat(3,1fr)}
figure,tr,.keys div,.cautions li{break-inside:avoid}h2,h3{break-after:avoid}
.scroll{overflow:visible}table{font-size:8.5pt}.larges{display:grid;grid-template-columns:1fr 1fr;gap:4mm}}
)CSS";

}  // namespace falcate::post
