/** Draws sheets with WebGL2: the formula of lib/science/imaging/draw-sheet.ts, pixel by pixel, on the graphics card. */
import { CURVES, rangeOf, type DrawOptions } from '@/lib/science/imaging/draw-sheet'
import { MISSING_GREY } from '@/lib/science/imaging/render-grey'
import type { ViewSheet } from '@/lib/science/imaging/view-sheet'

const VERTEX = `#version 300 es
void main() {
  // One triangle over the whole picture.
  vec2 corner = vec2(gl_VertexID == 1 ? 3.0 : -1.0, gl_VertexID == 2 ? 3.0 : -1.0);
  gl_Position = vec4(corner, 0.0, 1.0);
}`

const FRAGMENT = `#version 300 es
precision highp float;
uniform highp sampler2D sheet;
uniform float black;
uniform float range;
uniform float softening;
uniform float rounding;
uniform int curve;
uniform bool invert;
out vec4 colour;

// The series keeps what a difference from 1 would lose.
float asinhOf(float x) { return x < 0.01 ? x - x * x * x / 6.0 : log(x + sqrt(x * x + 1.0)); }
float logOf(float x) { return x < 0.01 ? x - x * x / 2.0 + x * x * x / 3.0 : log(1.0 + x); }

float curveOf(float x) {
  if (curve == 0) return asinhOf(x / softening) / asinhOf(1.0 / softening);
  if (curve == 1) return logOf(x / softening) / logOf(1.0 / softening);
  if (curve == 2) return sqrt(x);
  return x;
}

void main() {
  vec4 texel = texelFetch(sheet, ivec2(gl_FragCoord.xy), 0);
  vec3 channels = texel.rgb - black;
  float intensity = (channels.r + channels.g + channels.b) / 3.0;
  float factor = intensity > 0.0 ? 255.0 * curveOf(intensity / range) / intensity : 0.0;
  float largest = max(channels.r, max(channels.g, channels.b)) * factor;
  if (largest > 255.0) factor *= 255.0 / largest;
  vec3 counts = texel.a < 0.5 ? vec3(${MISSING_GREY}.0) : floor(max(channels, 0.0) * factor + rounding);
  counts = min(counts, 255.0);
  colour = vec4((invert ? 255.0 - counts : counts) / 255.0, 1.0);
}`

const UNIFORMS = ['black', 'range', 'softening', 'rounding', 'curve', 'invert'] as const
const MOST_TEXTURES = 12

export interface SheetShader {
  /** The drawn picture, to be copied at once; null when the card cannot take it. */
  draw(sheet: ViewSheet, options: DrawOptions): HTMLCanvasElement | null
}

/** null: this browser has no WebGL2. */
export function makeSheetShader(): SheetShader | null {
  const canvas = document.createElement('canvas')
  const gl = canvas.getContext('webgl2', { alpha: false, antialias: false, depth: false, stencil: false })
  if (!gl) return null
  const program = link(gl)
  if (!program) return null
  const places = new Map(UNIFORMS.map((name) => [name, gl.getUniformLocation(program, name)]))
  const at = (name: (typeof UNIFORMS)[number]) => places.get(name) ?? null
  const mostSide = gl.getParameter(gl.MAX_TEXTURE_SIZE) as number
  gl.useProgram(program)
  gl.bindVertexArray(gl.createVertexArray())
  const textures = new Map<ViewSheet, WebGLTexture>()

  function bind(sheet: ViewSheet, context: WebGL2RenderingContext): boolean {
    const known = textures.get(sheet)
    if (known) {
      context.bindTexture(context.TEXTURE_2D, known)
      return true
    }
    const texture = context.createTexture()
    if (!texture) return false
    for (const [old, its] of textures) {
      if (textures.size < MOST_TEXTURES) break
      context.deleteTexture(its)
      textures.delete(old)
    }
    upload(context, texture, sheet)
    textures.set(sheet, texture)
    return true
  }

  return {
    draw(sheet, options) {
      const { width, height } = sheet
      if (gl.isContextLost() || Math.max(width, height) > mostSide || !bind(sheet, gl)) return null
      if (canvas.width !== width || canvas.height !== height) {
        canvas.width = width
        canvas.height = height
      }
      gl.viewport(0, 0, width, height)
      const range = rangeOf(options)
      gl.uniform1f(at('black'), options.blackSigma)
      gl.uniform1f(at('range'), range)
      gl.uniform1f(at('softening'), options.softeningSigma / range)
      gl.uniform1f(at('rounding'), sheet.colour ? 0 : 0.5)
      gl.uniform1i(at('curve'), CURVES.indexOf(options.curve))
      gl.uniform1i(at('invert'), options.invert ? 1 : 0)
      gl.drawArrays(gl.TRIANGLES, 0, 3)
      return canvas
    },
  }
}

function link(gl: WebGL2RenderingContext): WebGLProgram | null {
  const program = gl.createProgram()
  for (const [kind, source] of [
    [gl.VERTEX_SHADER, VERTEX],
    [gl.FRAGMENT_SHADER, FRAGMENT],
  ] as const) {
    const shader = gl.createShader(kind)
    if (!shader) return null
    gl.shaderSource(shader, source)
    gl.compileShader(shader)
    gl.attachShader(program, shader)
  }
  gl.linkProgram(program)
  return gl.getProgramParameter(program, gl.LINK_STATUS) ? program : null
}

/** One texel a pixel, 32-bit floats, never smoothed; the fourth says whether there is data. */
function upload(gl: WebGL2RenderingContext, texture: WebGLTexture, sheet: ViewSheet): void {
  const { width, height, red, green, blue, missing } = sheet
  const texels = new Float32Array(4 * width * height)
  for (let i = 0, out = 0; i < missing.length; i++, out += 4) {
    if (missing[i] === 1) continue
    texels[out] = red[i]
    texels[out + 1] = green[i]
    texels[out + 2] = blue[i]
    texels[out + 3] = 1
  }
  gl.bindTexture(gl.TEXTURE_2D, texture)
  gl.texParameteri(gl.TEXTURE_2D, gl.TEXTURE_MIN_FILTER, gl.NEAREST)
  gl.texParameteri(gl.TEXTURE_2D, gl.TEXTURE_MAG_FILTER, gl.NEAREST)
  gl.texImage2D(gl.TEXTURE_2D, 0, gl.RGBA32F, width, height, 0, gl.RGBA, gl.FLOAT, texels)
}
