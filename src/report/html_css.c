/* The look of every page. Colours are custom properties, so that drawings and charts follow light,
 * dark and print; nothing is fetched. No < > & in here (markup.h), hence no child combinators. */
#include "report/html.h"

/* paper, ink and what lies between: soft (secondary words), rule and hair (lines), wash (surfaces);
 * key and warm carry data; good and bad are never the only sign of a verdict. Contrast with paper
 * is at least 4.5 for what is read. */
static const char colours[] =
    ":root{color-scheme:light dark;--paper:#fcfbf8;--ink:#1b1f24;--soft:#59606a;--rule:#a8a396;"
    "--hair:#e0dcd1;--wash:#f3f0e8;--key:#1d5c78;--warm:#9c4417;--good:#29653b;--bad:#9f261c}\n"
    "@media (prefers-color-scheme:dark){:root{--paper:#14171a;--ink:#e7e4dd;--soft:#a5aab0;"
    "--rule:#5b6168;--hair:#2b3036;--wash:#1b1f23;--key:#83bcd6;--warm:#e8a277;--good:#8fcaa0;"
    "--bad:#f0a097}}\n"
    "@media print{:root{color-scheme:light;--paper:#fff;--ink:#000;--soft:#444;--rule:#888;"
    "--hair:#ccc;--wash:#f4f4f4;--key:#1d5c78;--warm:#9c4417;--good:#29653b;--bad:#9f261c}}\n";

static const char words[] =
    "*{box-sizing:border-box}\n"
    "html{-webkit-text-size-adjust:100%;text-size-adjust:100%}\n"
    "body{margin:0 auto;max-width:76rem;padding:0 clamp(1rem,4vw,3rem) 3rem;background:var(--paper);"
    "color:var(--ink);font:1rem/1.5 system-ui,-apple-system,\"Segoe UI\",Roboto,\"Noto Sans\","
    "\"Liberation Sans\",sans-serif;overflow-wrap:anywhere}\n"
    "h1,h2,h3,h4{font-family:\"Iowan Old Style\",\"Palatino Linotype\",Palatino,Georgia,"
    "\"Liberation Serif\",serif;font-weight:600;line-height:1.2;text-wrap:balance}\n"
    "h1{font-size:clamp(1.5rem,1.1rem + 1.8vw,2.3rem);margin:0}\n"
    "h2{font-size:1.3rem;margin:0 0 .75rem}\n"
    "h3{font-size:1.05rem;margin:1.75rem 0 .5rem}\n"
    "h4{font-size:.95rem;margin:1.25rem 0 .4rem}\n"
    "p,ul{margin:0 0 .75rem;max-width:46rem}\n"
    "ul{padding-left:1.2rem}\n"
    "li{margin:0 0 .3rem}\n"
    "code,td.w{font-family:ui-monospace,\"Cascadia Mono\",Menlo,Consolas,\"Liberation Mono\","
    "monospace;font-size:.86em}\n"
    ".line{font-size:1.1rem;max-width:none}\n"
    ".lead{font-size:1.15rem}\n"
    ".soft{color:var(--soft)}\n"
    ".good,.bad,.care{border-left:.25rem solid var(--good);padding-left:.75rem}\n"
    ".bad{border-color:var(--bad)}\n"
    ".care{border-color:var(--warm)}\n";

static const char layout[] =
    "header{border-top:.3rem solid var(--ink);border-bottom:1px solid var(--rule);"
    "padding:1rem 0 1.25rem;margin:1.5rem 0 0}\n"
    ".kind{margin:0 0 .35rem;color:var(--soft);font-size:.9rem;letter-spacing:.04em}\n"
    "main{counter-reset:part}\n"
    "section{border-bottom:1px solid var(--rule);padding:1.75rem 0}\n"
    "section h2{counter-increment:part}\n"
    "section h2::before{content:counter(part) \"\\2002\";color:var(--soft);font-weight:400}\n"
    ".pair{display:grid;gap:1.5rem 2.5rem;grid-template-columns:minmax(0,1fr)}\n"
    ".cards{display:grid;gap:1.25rem;grid-template-columns:repeat(auto-fill,minmax(min(100%,19rem),"
    "1fr))}\n"
    ".card{border:1px solid var(--rule);padding:1rem;break-inside:avoid;min-width:0}\n"
    ".card h3{margin-top:0}\n"
    "figure{margin:0 0 1rem;min-width:0;break-inside:avoid}\n"
    "figure svg{display:block;width:100%;height:auto}\n"
    "figcaption{color:var(--soft);font-size:.87rem;margin-top:.35rem;max-width:46rem}\n"
    ".chart{max-width:48rem}\n"
    ".drawing{max-width:60rem}\n"
    ".card-drawing{max-width:22rem}\n"
    ".narrow{display:none}\n"
    "@media (max-width:40rem){.wide{display:none}.narrow{display:block}.chart{overflow-x:auto}"
    ".chart svg{min-width:30rem}}\n"
    "@media print{.wide{display:block}.narrow{display:none}.chart svg{min-width:0}}\n"
    "details{margin:0 0 1rem}\n"
    "summary{color:var(--soft);cursor:pointer}\n"
    "@media (min-width:62rem){.pair{grid-template-columns:minmax(0,1fr) minmax(0,1fr)}}\n"
    ".figures{display:grid;grid-template-columns:repeat(auto-fill,minmax(9.5rem,1fr));gap:0 1.5rem;"
    "margin:0 0 1.25rem}\n"
    ".figures div{border-top:1px solid var(--rule);padding:.45rem 0 .8rem}\n"
    ".figures dt{color:var(--soft);font-size:.87rem}\n"
    ".figures dd{margin:0;font-size:1.45rem;line-height:1.25;font-variant-numeric:tabular-nums}\n"
    ".figures .note{font-size:.87rem;line-height:1.4;color:var(--soft)}\n"
    ".card .figures{grid-template-columns:repeat(2,minmax(0,1fr));gap:0 1rem;margin:0}\n"
    ".card .figures dd{font-size:1.1rem}\n"
    ".card .figures .note{font-size:.82rem}\n"
    ".facts{margin:0 0 1rem;max-width:60rem}\n"
    ".facts div{display:grid;grid-template-columns:minmax(0,12rem) minmax(0,1fr);gap:.1rem 1.25rem;"
    "border-bottom:1px solid var(--hair);padding:.35rem 0}\n"
    ".facts dt{color:var(--soft)}\n"
    ".facts dd{margin:0}\n"
    "@media (max-width:34rem){.facts div{grid-template-columns:minmax(0,1fr)}}\n"
    "footer{padding:1.5rem 0 0}\n"
    "footer .facts{max-width:none;border:1px solid var(--rule);font-size:.87rem}\n"
    "footer .facts div{padding:.35rem .75rem}\n";

static const char tables[] =
    ".scroll{overflow-x:auto;margin:0 0 1.25rem}\n"
    ".scroll:focus-visible,.chart:focus-visible{outline:2px solid var(--key);outline-offset:2px}\n"
    "table{border-collapse:collapse;min-width:min(100%,36rem);font-size:.93rem;font-variant-numeric:tabular-nums}\n"
    "caption{text-align:left;font-weight:600;padding:0 0 .4rem}\n"
    "th,td{text-align:left;vertical-align:baseline;padding:.3rem 1rem .3rem 0;"
    "border-bottom:1px solid var(--hair);font-weight:400;min-width:3.2rem}\n"
    "th:last-child,td:last-child{padding-right:0}\n"
    "thead th{color:var(--soft);font-size:.87rem;border-bottom:1px solid var(--ink);"
    "vertical-align:bottom}\n"
    "td,th{overflow-wrap:normal}\n"
    "td:not([class]){min-width:7rem}\n"
    "td[dir],th[dir]{overflow-wrap:anywhere;min-width:8rem}\n"
    "td[dir=rtl]{text-align:right}\n"
    ".n{text-align:right;white-space:nowrap}\n"
    "tbody .i{white-space:nowrap}\n"
    "thead .n{white-space:normal}\n"
    "td.w,th.w{min-width:15rem}\n"
    "td.w{overflow-wrap:anywhere;font-size:.86rem}\n"
    ".total td,.total th{border-top:1px solid var(--ink);border-bottom:none;font-weight:600}\n"
    ".chosen td,.chosen th{background:var(--wash)}\n"
    ".bands,.bands thead th{font-size:.8rem}\n"
    ".dense{font-size:.85rem}\n"
    ".bands th,.bands td{padding-right:.3rem;min-width:0}\n";

static const char print[] =
    "@page{margin:15mm 14mm 17mm;@bottom-right{content:counter(page) \" / \" counter(pages);"
    "font:8pt sans-serif;color:#444}}\n"
    "@media print{body{max-width:none;padding:0;font-size:9.5pt;line-height:1.4}\n"
    "header{margin-top:0}\n"
    "h1{font-size:18pt}\n"
    "h2{font-size:13pt}\n"
    ".line{font-size:10pt}\n"
    ".figures dd{font-size:13pt}\n"
    ".figures .note,.figures dt,figcaption{font-size:8.5pt}\n"
    ".pair{grid-template-columns:minmax(0,1fr) minmax(0,1fr)}\n"
    ".chart{max-width:150mm}\n"
    "section{padding:5mm 0}\n"
    "h2,h3,h4,caption{break-after:avoid}\n"
    "thead{display:table-header-group}\n"
    "tbody tr:first-child{break-before:avoid}\n"
    "tr,figure,.figures div,.facts div,li{break-inside:avoid}\n"
    ".scroll{overflow:visible}\n"
    "table{font-size:8pt}\n"
    "thead th,td.w{font-size:7.5pt}\n"
    "th,td{padding:.6mm 2.5mm .6mm 0;min-width:0}\n"
    "td.w,th.w{min-width:38mm}\n"
    ".bands,.bands thead th,.dense,.dense thead th,.dense td.w{font-size:6pt}\n"
    ".dense th,.dense td{padding-right:1.2mm}\n"
    ".dense td[dir],.dense th[dir]{min-width:9mm}\n"
    "td:not([class]),.dense td.w{min-width:16mm}}\n";

void html_style(text *out) {
  text_put(out, colours);
  text_put(out, words);
  text_put(out, layout);
  text_put(out, tables);
  text_put(out, print);
}
