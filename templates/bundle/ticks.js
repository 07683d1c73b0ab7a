// Ticks and numbers of axes.

// nice is the smallest of 1, 2, 5 times a power of ten that is not below x.
export function nice(x) {
  const decade = Math.pow(10, Math.floor(Math.log10(x) + 1e-9))
  for (const m of [1, 2, 5]) if (m * decade >= x * (1 - 1e-9)) return m * decade
  return 10 * decade
}

// niceDown is the largest of 1, 2, 5 times a power of ten that is not above x.
function niceDown(x) {
  const decade = Math.pow(10, Math.floor(Math.log10(x) + 1e-9))
  return [5, 2, 1].find((m) => m * decade <= x * (1 + 1e-9)) * decade
}

// multiples of step from lo to hi, counted in whole steps so that 0.3 is 0.3.
function multiples(lo, hi, step) {
  const out = []
  const per = Math.round(1 / step)
  for (let k = Math.ceil(lo / step - 1e-6); k * step <= hi + 1e-6 * step; k++) out.push(step < 1 && per > 0 ? k / per : k * step)
  return out
}

// ticks places ticks from lo to hi on an axis px long, at least space apart. A
// logarithmic axis gets 1, 2, 5 of each decade as far as they fit, and its ends.
export function ticks(lo, hi, log, px, space) {
  if (!(hi > lo) || !(px > 0)) return [lo]
  if (!log || lo <= 0) {
    const out = multiples(lo, hi, nice(((hi - lo) * space) / px))
    const end = niceDown(hi)
    return out.length < 3 && lo === -hi ? [-end, 0, end] : out
  }
  const place = (v) => (px * Math.log(v / lo)) / Math.log(hi / lo)
  const decade = px / Math.log10(hi / lo)
  const near = space * 0.5
  const steps = decade * 0.3 >= near ? [1, 2, 5] : [1]
  const out = []
  for (let e = Math.floor(Math.log10(lo) + 1e-9); e <= Math.log10(hi) + 1e-9; e++) {
    for (const m of steps) {
      const v = e < 0 ? m / Math.pow(10, -e) : m * Math.pow(10, e)
      if (v >= lo * (1 - 1e-9) && v <= hi * (1 + 1e-9)) out.push(v)
    }
  }
  if (out.length < 3 && (hi < 10 * lo || out.length < 2)) return multiples(lo, hi, nice(((hi - lo) * space) / px))
  for (const end of [lo, hi]) {
    const short = Number(end.toPrecision(2)) === end
    if (short && out.every((v) => Math.abs(place(v) - place(end)) >= near)) out.push(end)
  }
  return out.sort((a, b) => a - b)
}

const raised = (n) => [...String(n)].map((c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[+c])).join('')

// grouped puts narrow no-break spaces into five or more digits before the point.
function grouped(text) {
  const [whole, rest] = text.split('.')
  const g = whole.length >= 5 ? whole.replace(/\B(?=(\d{3})+$)/g, '\u202f') : whole
  return rest === undefined ? g : g + '.' + rest
}

// number writes x with a true minus, to at most digits significant digits, without
// trailing zeros unless decimals asks for them.
export function number(x, digits, decimals) {
  if (x === 0) return '0'
  const a = Math.abs(x)
  const sign = x < 0 ? '\u2212' : ''
  if (a >= 1e7 || a < 1e-4) {
    const [m, e] = a.toExponential(Math.max(digits - 1, 0)).split('e')
    const short = String(Number(m))
    return sign + (short === '1' ? '' : short + '×') + '10' + raised(Number(e))
  }
  if (decimals !== undefined) return sign + grouped(a.toFixed(decimals))
  const places = Math.max(0, digits - 1 - Math.floor(Math.log10(a) + 1e-12))
  const text = a.toFixed(Math.min(places, 12))
  return sign + grouped(text.includes('.') ? text.replace(/0+$/, '').replace(/\.$/, '') : text)
}

// labels writes a row of ticks: alike many decimals on a plain axis.
export function labels(values, log) {
  if (log) return values.map((v) => number(v, 3))
  let decimals = 0
  for (const v of values) {
    const [, rest] = String(Number(v.toPrecision(6))).split('e')[0].split('.')
    if (rest) decimals = Math.max(decimals, rest.length)
  }
  return values.map((v) => number(v, 4, decimals))
}

// width guesses how wide a text is in the label face, in px.
export function width(text, size) {
  let w = 0
  for (const c of text) w += 'il.,:;|\u202f\u2009 '.includes(c) ? 0.26 : c >= 'A' && c <= 'Z' ? 0.6 : 0.52
  return w * size
}
