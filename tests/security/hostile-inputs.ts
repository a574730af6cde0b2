import { HOSTILE_NOTES } from '../support/hostile-notes'

/**
 * Text for every place that keeps text, written to run script, to reach another origin or to break out of where it is
 * shown, should any of these places take text for code. Forms as in the OWASP filter evasion sheet.
 */
export const HOSTILE_WORDS: readonly string[] = [
  '<script>alert(1)</script>',
  '<img src=x onerror=alert(1)>',
  '"><svg/onload=alert(1)>',
  "{{constructor.constructor('alert(1)')()}}",
  '</title><script>__marker=1</script>',
  "' onfocus=alert(1) autofocus x='",
  '<a href=javascript:alert(1)>x</a>',
  '<iframe srcdoc="<script>alert(1)</script>">',
  '</style><script>__marker=2</script>',
  '<b v-html=x :is=x>__proto__</b>',
]

/** Formulas: links, classes and pictures that KaTeX knows, macros without end, sizes without end. */
export const HOSTILE_TEX: readonly string[] = [
  '\\href{javascript:alert(1)}{x}',
  '\\url{javascript:alert(1)}',
  '\\htmlData{onclick=alert(1)}{x}',
  '\\htmlStyle{background:url(https://evil.example/x)}{x}',
  '\\htmlId{app}{x}',
  '\\htmlClass{frame-status}{x}',
  '\\includegraphics[width=9em]{https://evil.example/x.png}',
  '\\def\\a{\\a\\a}\\a',
  '\\gdef\\R{\\frac{R}{R}}\\newcommand{\\b}{\\b\\b}\\b',
  '\\edef\\x{\\x\\x}\\x',
  '\\rule{999em}{999em}',
  '\\rule{999999em}{1em}',
  '\\kern{9999em}x',
  '\\hspace{9999em}x',
  '\\text{</span><script>alert(1)</script>}',
  '\\text{<img src=x onerror=alert(1)>}',
  '\\unknown{<svg onload=alert(1)>}',
  '\\color{red;background:url(//evil.example/x)}x',
  '\\textcolor{expression(alert(1))}{x}',
  `${'\\frac{1}{'.repeat(400)}1${'}'.repeat(400)}`,
  `${'{'.repeat(3000)}x${'}'.repeat(3000)}`,
  '\\char"10FFFF',
  '\\verb|<script>alert(1)</script>|',
]

/** Notes in Markdown, formulas among them. */
export const HOSTILE_PARAGRAPHS: readonly string[] = [
  ...HOSTILE_NOTES,
  ...HOSTILE_TEX.map((tex) => `$$\n${tex}\n$$`),
  ...HOSTILE_TEX.slice(0, 8).map((tex) => `In a line $${tex}$ and on.`),
  '# __proto__\n\n## location\n\n## constructor\n\n## app\n\n## getElementById\n\n## q-app',
  '[x](<https://ok.example/" onmouseover="alert(1)>)',
  '[x](https://ok.example/ "\\" onmouseover=alert(1) x=\\"")',
  '| a | b |\n|---|---|\n| <img src=x onerror=alert(1)> | [x](javascript:alert(1)) |',
  '```<img/src=x/onerror=alert(1)>\nx\n```',
  '![<img src=x onerror=alert(1)>](https://evil.example/x.png "x")',
]

/** Paths that carry hostile words in an address. */
export const hostileAddresses = (words: string): string[] => {
  const written = encodeURIComponent(words)
  return [
    `/?search=${written}`,
    `/?topology=${written}`,
    `/blocks/${written}`,
    `/blocks/hostile-0?Ri=${written}&${written}=1`,
    `/sizings/${written}`,
    `/help/${written}`,
    `/problems/${written}`,
    `/${written}#${written}`,
  ]
}

/** Where sign-in must not lead. */
export const HOSTILE_TARGETS: readonly string[] = [
  'javascript:alert(1)',
  'JaVaScRiPt:alert(1)',
  '//evil.example/',
  '/\\evil.example/',
  '\\\\evil.example/',
  'https://evil.example/',
  '/\t/evil.example/',
  'data:text/html,<script>alert(1)</script>',
]

export interface HostileBlock {
  code: string
  /** Text for each place, asked for once a place: it may number what it gives. */
  words: (limit: number) => string
  notes: string
}

/** A page that can be read, with hostile text in every place of it that takes free text. */
export function hostilePage({ code, words, notes }: HostileBlock): string {
  const text = (limit: number) => JSON.stringify(words(limit))
  return `---
format: 1
code: ${code}
title: ${text(120)}
function: low-pass
topology: ${text(60)}
order: 1
tags: [${text(60)}]
aliases: [${text(60)}]
owner: ${text(80)}
summary: ${text(300)}
---

\`\`\`circuit
input in 1,6
wire 1,6 3,6
R Ri 3,6 6,6
wire 6,6 11,6
wire 8,6 8,1 9,1
wire 8,3 9,3
C Cf 9,1 13,1 label above
R Rf 9,3 13,3
wire 13,1 16,1 16,7
wire 13,3 16,3
opamp U1 - 11,6 + 11,8 out 15,7
wire 11,8 10,8 10,9
ground 10,9
wire 15,7 18,7
output out 18,7
\`\`\`

\`\`\`calculator
parts:
  Ri: { default: 22.1k, series: E96, tolerance: 1 %, class: ${text(60)}, meaning: ${text(500)} }
  Rf: { default: 44.2k, series: E96, tolerance: 1 % }
  Cf: { default: 1.5n, series: E12, tolerance: 5 % }
results:
  f_c: { formula: 1/(2*pi*Rf*Cf), unit: Hz, meaning: ${text(500)}, is: half-power frequency }
  K: { formula: -Rf/Ri, symbol: ${JSON.stringify('\\url{javascript:a}')}, meaning: gain, is: gain at 0 Hz }
response: -(Rf/Ri)/(1 + s*Rf*Cf)
sizing:
  targets: { f_c: 2.4 kHz, K: -2 }
  free:
    Cf: { start: 1/(2*pi*f_c*47k) }
  steps:
    - { part: Rf, formula: 1/(2*pi*f_c*Cf) }
    - { part: Ri, formula: -Rf/K }
limits:
  - { level: warning, when: Rf > 1k, say: ${text(500).replace(/[{}]/g, '')} }
\`\`\`

:formula[K] and :formula[f_c] and :value[K]

${notes}
`
}
