// The page's script. Each figure carries a static picture and, beside it, the chart
// option; a figure that comes near the window becomes a chart to work with. On paper
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

const near = new IntersectionObserver(
  (entries) => {
    for (const e of entries) {
      if (!e.isIntersecting) continue
      near.unobserve(e.target)
      start(e.target)
    }
  },
  { rootMargin: '400px 0px' },
)
let block = 0
for (const e of document.querySelectorAll('.bh:not(.again), figure[data-chart]')) {
  if (e.matches('.bh')) block++
  else {
    e.dataset.block = block // whose charts point together
    near.observe(e)
  }
}

const paper = (on) => {
  for (const live of figures.values()) if (live) live.paper(on)
}
addEventListener('beforeprint', () => paper(true))
addEventListener('afterprint', () => paper(false))
matchMedia('print').addEventListener('change', (e) => paper(e.matches))
