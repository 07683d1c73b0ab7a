// Makes templates/dist: what a written page carries, from the packages of the
// lock file. The same lock file gives the same bytes.
import { mkdir, readFile, writeFile } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import esbuild from 'esbuild'
import { fontsCSS } from './fonts.mjs'

const here = dirname(fileURLToPath(import.meta.url))
const dist = join(here, '..', 'dist')
const modules = join(here, '..', '..', 'node_modules')

// script bundles one entry into one file without module syntax.
async function script(entry, target) {
  const built = await esbuild.build({
    entryPoints: [join(here, entry)],
    bundle: true,
    write: false,
    minify: true,
    format: 'iife',
    target,
    charset: 'ascii', // no U+2028 and no byte order to get wrong
    legalComments: 'none', // collected in licences.txt
    define: { 'process.env.NODE_ENV': '"production"' },
    logLevel: 'warning',
  })
  // It stands inside a <script> element: nothing in it may close that element.
  return built.outputFiles[0].text.replaceAll('</script', '<\\/script').replaceAll('<!--', '<\\!--')
}

// temmlCSS is the stylesheet of the formula typesetter without its own fonts.
async function temmlCSS() {
  const css = await readFile(join(modules, 'temml', 'dist', 'Temml-STIX2.css'), 'utf8')
  const bare = css
    .replace(/@font-face\s*\{[^}]*\}/g, '')
    .replace(/font-family:\s*STIX2,\s*math/g, 'font-family: Math, math')
  const out = await esbuild.transform(bare, { loader: 'css', minify: true, legalComments: 'none', logLevel: 'silent' })
  return out.code
}

async function licences() {
  const texts = [
    ['Apache ECharts', 'echarts/LICENSE', 'echarts/NOTICE'],
    ['d3, in Apache ECharts', 'echarts/licenses/LICENSE-d3'],
    ['ZRender', 'zrender/LICENSE'],
    ['tslib', 'tslib/LICENSE.txt'],
    ['Temml', 'temml/LICENSE'],
    ['STIX Two Text', '@fontsource/stix-two-text/LICENSE'],
    ['STIX Two Math', '@fontsource/stix-two-math/LICENSE'],
    ['IBM Plex Sans Condensed', '@fontsource/ibm-plex-sans-condensed/LICENSE'],
  ]
  const parts = []
  for (const [name, ...files] of texts) {
    let text = name + '\n' + '='.repeat(name.length) + '\n'
    for (const file of files) text += '\n' + (await readFile(join(modules, file), 'utf8')).replaceAll('\r\n', '\n').trim() + '\n'
    parts.push(text)
  }
  return parts.join('\n\n')
}

const files = {
  'page.js': script('page.js', 'es2020'),
  'press.js': script('press.js', 'es2015'),
  'fonts.css': fontsCSS(modules),
  'temml.css': temmlCSS(),
  'licences.txt': licences(),
}
await mkdir(dist, { recursive: true })
for (const [name, made] of Object.entries(files)) {
  const text = await made
  await writeFile(join(dist, name), text)
  console.log(`${name.padEnd(14)} ${(text.length / 1000).toFixed(0).padStart(6)} kB`)
}
