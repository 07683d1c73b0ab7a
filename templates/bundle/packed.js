// The points of curves. In an option they are pairs of numbers, or letters
// (render/chart/packed.go says how); to work with, all are one flat list x, y, x, y,
// which the chart library takes as it is.
const letters = "!#$%'()*+,-./0123456789:;=?@ABCDEFGHIJKLMNOPQRSTUVWXYZ[]^_`abcdefghijklmnopqrstuvwxyz{|}"
const digit = new Uint8Array(128)
for (let i = 0; i < letters.length; i++) digit[letters.charCodeAt(i)] = i
const base = letters.length, one = 36, two = 78, three = base - 1
const again = 126 // ~

// unpack gives every curve of an option its flat list. The option is changed.
export function unpack(option) {
  for (const s of option.series) {
    const d = s.data
    if (s.type !== 'line' || ArrayBuffer.isView(d)) continue
    if (Array.isArray(d)) {
      s.data = new Float64Array(2 * d.length)
      d.forEach((p, i) => { s.data[2 * i] = p[0]; s.data[2 * i + 1] = p[1] })
    } else {
      s.data = new Float64Array(2 * d.n)
      row(s.data, 0, d.n, d.x)
      row(s.data, 1, d.n, d.y)
    }
    s.dimensions = ['x', 'y']
  }
  return option
}

// count is the number of points of a flat list, pairs its points.
export const count = (data) => data.length / 2
export const pairs = (data) => Array.from({ length: count(data) }, (_, i) => [data[2 * i], data[2 * i + 1]])

// row reads a column into every other place of a list.
function row(to, at, n, [power, order, divisor, text]) {
  const scale = Number('1e' + Math.abs(power))
  const over = power >= 0
  let next = 0
  const number = () => {
    const f = digit[text.charCodeAt(next++)]
    if (f < one) return f
    if (f < two) return one + (f - one) * base + digit[text.charCodeAt(next++)]
    if (f < three) {
      const v = one + (two - one) * base + ((f - two) * base + digit[text.charCodeAt(next)]) * base + digit[text.charCodeAt(next + 1)]
      next += 2
      return v
    }
    let v = 0
    for (let left = digit[text.charCodeAt(next++)]; left > 0; left--) v = v * base + digit[text.charCodeAt(next++)]
    return v
  }
  let left = 0, same = 0 // what was read last, how often it comes again
  let first = 0, second = 0, third = 0 // the value, its difference, the difference of that
  for (let i = 0; i < n; i++) {
    if (same > 0) same--
    else if (text.charCodeAt(next) === again) {
      next++
      same = number() - 1
    } else {
      const z = number()
      left = z % 2 ? -(z + 1) / 2 : z / 2
    }
    // The first value is itself; differences begin as soon as there are so many points.
    const v = i ? left * divisor : left
    if (i === 0) first = v
    else if (i === 1 || order === 1) first += second = v
    else if (i === 2 || order === 2) first += second += third = v
    else first += second += third += v
    to[2 * i + at] = over ? first / scale : first * scale
  }
}
