// The page's script. Each figure carries a static picture and, beside it, the chart
// option; a figure that is seen becomes a chart to work with. On paper
// the static pictures stand. Without this script nothing is missing but the working.
import { Live } from './live.js'
import './trail.js'

const figures = new Map()

function start(figure) {
  if (figures.has(figure)) return
  try {
    figures.set(figure, new Live(figure))
  } catch (error) {
    figures.set(figure, null) // the static picture stays
    for (const [part, hide] of [['.live', true], ['.twin', false]]) {
      const e = figure.querySelector(part)
      if (e) e.hidden = hide
    }
    console.error(error)
  }
}

// One chart a frame; a figure that is out of sight again before its turn waits until it is seen once more.
const seen = new Set()
let turn = 0
const next = () => {
  const [figure] = seen
  if (figure) {
    seen.delete(figure)
    watch.unobserve(figure)
    start(figure)
  }
  turn = seen.size && requestAnimationFrame(next)
}
const watch = new IntersectionObserver((entries) => {
  for (const e of entries) e.isIntersecting ? seen.add(e.target) : seen.delete(e.target)
  turn ||= seen.size && requestAnimationFrame(next)
})
let block = 0
for (const e of document.querySelectorAll('.bh:not(.again), figure[data-chart]')) {
  if (e.matches('.bh')) block++
  else {
    e.dataset.block = block // whose charts point together
    watch.observe(e)
  }
}

const paper = (on) => {
  for (const live of figures.values()) if (live) live.paper(on)
}
addEventListener('beforeprint', () => paper(true))
addEventListener('afterprint', () => paper(false))
matchMedia('print').addEventListener('change', (e) => paper(e.matches))
