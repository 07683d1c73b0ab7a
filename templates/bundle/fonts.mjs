// The embedded fonts: subsets as data, so that a page opens the same everywhere.
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import subset from 'subset-font'

// range is every character from one code point to another.
const range = (from, to) => String.fromCodePoint(...Array.from({ length: to - from + 1 }, (_, i) => from + i))

const latin = range(0x20, 0x7e) + range(0xa0, 0xff) + 'ıŒœŠšŽžŸ' + '\u2009\u202f' + '‐‑–—‘’‚“”„†‡•…‰′″€™−∕↑↓'
const latinMore = 'ĀāĂăĄąĆćĈĉČčĎďĐđĒēĖėĘęĚěĞğĢģĪīĮįİĶķĹĺĻļĽľŁłŃńŅņŇňŌōŐőŔŕŘřŚśŞşŢţŤťŪūŮůŰűŲųŹźŻżȘșȚț'
const greek = range(0x391, 0x3a1) + range(0x3a3, 0x3a9) + range(0x3b1, 0x3c9) + 'ϑϕϵ'
// What the text faces lack and the mathematics face has.
const symbols = '\u2009\u202f⁰⁴⁵⁶⁷⁸⁹⁻⁺₀₁₂₃₄₅₆₇₈₉·√≈≠≤≥≪≫∞∑∫∂∆∇±×÷←→↔⇒△▲▽▼◁▷○●□■✓✕✗✘⊥∥∠°⋅'

// For equations: all that formula lines and TeX in prose commonly ask for. Italic, bold,
// script, blackboard and Greek letters live in the mathematical alphabets.
const maths =
  range(0x20, 0x7e) + range(0xa0, 0xff) + 'ıȷ' + greek + symbols +
  'ℎ\u2009\u200a\u202f\u2061\u2062\u2063\u2064' + '′″‴‵‖‗…⋯⋮⋱∀∃∈∉∋∖∗∘∝∧∨∩∪∬∮∴∵∼≃≅≡≲≳⊂⊃⊆⊇⊕⊗⌈⌉⌊⌋⟨⟩ℏℓℜℑℵℝℂℕℤℚℒℱℋℰℬℳℛ−∓∕∅∎★⊤⊢↦⇔⇐↑↓⏞⏟⎴⎵⏜⏝' +
  '\u0300\u0301\u0302\u0303\u0304\u0306\u0307\u0308\u030a\u030c\u0331\u0332\u20d7\u20d6\u20db\u02c6\u02dc\u02d9\u02c9\u02d8\u02c7\u00af\u203e\u005e' +
  range(0x1d400, 0x1d467) + // bold and italic
  range(0x1d49c, 0x1d4cf) + // script
  range(0x1d538, 0x1d56b) + // blackboard bold
  range(0x1d6a4, 0x1d6a5) + // dotless italic
  range(0x1d6a8, 0x1d6fa) + range(0x1d6fc, 0x1d71b) + // bold and italic Greek
  range(0x1d7ce, 0x1d7d7) // bold figures

// Features the page asks for; the rest is dropped.
const textFeatures = ['kern', 'mark', 'mkmk', 'ccmp', 'locl', 'liga', 'lnum', 'tnum', 'onum', 'pnum', 'zero']

// A face is one @font-face: family, weight, style, source file, characters, features.
const text = (slice, weight, style, chars) => ({
  family: 'Text', weight, style, chars, keep: textFeatures,
  file: `@fontsource/stix-two-text/files/stix-two-text-${slice}-${weight}-${style}.woff2`,
})
const label = (slice, weight, chars) => ({
  family: 'Label', weight, style: 'normal', chars, keep: textFeatures,
  file: `@fontsource/ibm-plex-sans-condensed/files/ibm-plex-sans-condensed-${slice}-${weight}-normal.woff2`,
})
const mathFile = '@fontsource/stix-two-math/files/stix-two-math-latin-400-normal.woff2'
const greekFile = '@fontsource/stix-two-text/files/stix-two-text-greek-400-normal.woff2'

// A browser looks for a character only among faces of the weight and style it has
// chosen, so each of them gets the symbols.
const symbol = (family, weight, style) => ({ family, weight, style, chars: symbols, keep: [], file: mathFile })

const faces = [
  text('latin', 400, 'normal', latin), text('latin', 400, 'italic', latin), text('latin', 700, 'normal', latin),
  text('latin-ext', 400, 'normal', latinMore), text('latin-ext', 700, 'normal', latinMore),
  text('greek', 400, 'normal', greek), text('greek', 400, 'italic', greek), text('greek', 700, 'normal', greek),
  symbol('Text', 400, 'normal'), symbol('Text', 400, 'italic'), symbol('Text', 700, 'normal'),
  label('latin', 400, latin), label('latin', 600, latin), label('latin-ext', 400, latinMore), label('latin-ext', 600, latinMore),
  { family: 'Label', weight: 400, style: 'normal', chars: greek, keep: ['kern'], file: greekFile },
  symbol('Label', 400, 'normal'), symbol('Label', 600, 'normal'),
  { family: 'Math', weight: 400, style: 'normal', chars: maths, keep: ['ssty', 'flac', 'dtls', 'rtlm', 'ss01', 'ss04', 'kern', 'mark', 'mkmk', 'ccmp'], file: mathFile },
]

// points is the characters that a face really has, as code points in order.
async function points(font, chars) {
  const wanted = [...new Set([...chars].map((c) => c.codePointAt(0)))].sort((a, b) => a - b)
  const { default: verter } = await import('fontverter')
  const table = cmap(await verter.convert(font, 'truetype'))
  return wanted.filter((p) => table.has(p))
}

// cmap is the set of code points of a TrueType file (formats 4 and 12).
function cmap(buffer) {
  const v = new DataView(buffer.buffer, buffer.byteOffset, buffer.byteLength)
  let at = 0
  for (let i = 0; i < v.getUint16(4); i++) {
    const tag = String.fromCharCode(...[0, 1, 2, 3].map((k) => v.getUint8(12 + 16 * i + k)))
    if (tag === 'cmap') at = v.getUint32(12 + 16 * i + 8)
  }
  const out = new Set()
  for (let i = 0; i < v.getUint16(at + 2); i++) {
    const sub = at + v.getUint32(at + 4 + 8 * i + 4)
    const format = v.getUint16(sub)
    if (format === 12) {
      for (let g = 0; g < v.getUint32(sub + 12); g++) {
        const from = v.getUint32(sub + 16 + 12 * g), to = v.getUint32(sub + 20 + 12 * g)
        for (let p = from; p <= to; p++) out.add(p)
      }
    } else if (format === 4) {
      const n = v.getUint16(sub + 6)
      for (let s = 0; s < n; s += 2) {
        const to = v.getUint16(sub + 14 + s), from = v.getUint16(sub + 16 + n + s)
        for (let p = from; p <= to && p < 0xffff; p++) out.add(p)
      }
    }
  }
  return out
}

// unicodeRange is code points as CSS writes them: U+20-7E,U+A0.
function unicodeRange(list) {
  const hex = (p) => p.toString(16).toUpperCase()
  const out = []
  for (let i = 0; i < list.length; i++) {
    let j = i
    while (j + 1 < list.length && list[j + 1] === list[j] + 1) j++
    out.push(i === j ? `U+${hex(list[i])}` : `U+${hex(list[i])}-${hex(list[j])}`)
    i = j
  }
  return out.join(',')
}

export async function fontsCSS(modules) {
  let css = ''
  const taken = new Set() // the first face of a kind that has a character keeps it
  for (const f of faces) {
    const font = await readFile(join(modules, f.file))
    const kind = `${f.family} ${f.weight} ${f.style} `
    const list = (await points(font, f.chars)).filter((p) => !taken.has(kind + p))
    for (const p of list) taken.add(kind + p)
    const data = await subset(font, String.fromCodePoint(...list), { targetFormat: 'woff2', keepFeatures: f.keep, noHinting: true })
    // Faces of one family share it by character; the mathematics face stands alone.
    const share = f.family === 'Math' ? '' : `unicode-range:${unicodeRange(list)};`
    css += `@font-face{font-family:"${f.family}";font-weight:${f.weight};font-style:${f.style};font-display:block;${share}src:url(data:font/woff2;base64,${data.toString('base64')}) format("woff2")}\n`
  }
  return css
}
