// The page's one molecule viewer. The library has no way to give a viewer back, so a single one is made on first use and
// its element is handed from component to component.

import type { GLViewer } from '3dmol'
import { elementColours } from './structure'

const MARGIN = 0.82 // of the fitted size, so that the outermost atoms stay inside

let host: HTMLDivElement | undefined
let viewer: GLViewer | undefined

/** Attaches the viewer to a parent element. Throws where the browser has no WebGL. */
export async function attachViewer(parent: HTMLElement): Promise<void> {
  if (!host || !viewer) {
    const library = await import('3dmol/build/3Dmol.es6-min.js')
    host = document.createElement('div')
    host.className = 'viewer-host'
    host.addEventListener('wheel', leaveWheelToPage, { capture: true })
    parent.append(host)
    const made = library.createViewer(host, { backgroundColor: 'white', backgroundAlpha: 0, antialias: !softwareRendering() })
    if (!made) throw new Error('this browser offers no WebGL')
    viewer = made
  }
  parent.append(host)
  viewer.resize()
}

export function detachViewer(): void {
  viewer?.removeAllModels()
  host?.remove()
}

/** Shows one structure given as XYZ text; keeps the camera unless asked to fit. */
export function showStructure(xyz: string, fit: boolean): void {
  if (!viewer) return
  viewer.removeAllModels()
  viewer.addModel(xyz, 'xyz')
  const colorscheme = { prop: 'elem', map: elementColours }
  viewer.setStyle({}, { stick: { radius: 0.13, colorscheme }, sphere: { scale: 0.22, colorscheme } })
  if (fit) {
    viewer.zoomTo()
    viewer.zoom(MARGIN)
  }
  viewer.render()
}

function leaveWheelToPage(event: WheelEvent): void {
  if (!event.ctrlKey) event.stopPropagation()
}

function softwareRendering(): boolean {
  const gl = document.createElement('canvas').getContext('webgl')
  const info = gl?.getExtension('WEBGL_debug_renderer_info')
  const name = info ? String(gl?.getParameter(info.UNMASKED_RENDERER_WEBGL)) : ''
  return /swiftshader|llvmpipe/i.test(name)
}
