/**
 * The map stands upright with north up, so that a place in pixels from the middle is its distance in the world's measure
 * times the pixels of the world. Edges are softened over one pixel of the screen.
 */
const PLACE = `#version 300 es
uniform vec2 u_centre;
uniform float u_worldPx;
uniform vec2 u_sizePx;
vec4 placed(vec2 px) {
  return vec4(px * vec2(2.0, -2.0) / u_sizePx, 0.0, 1.0);
}
vec2 cornerOf(int vertex) {
  return vec2(vertex & 1, (vertex >> 1) & 1);
}
const vec4 NOWHERE = vec4(2.0, 2.0, 0.0, 1.0);
`;

const SOFT = `#version 300 es
precision highp float;
uniform float u_ratio;
out vec4 color;
float inside(float px) {
  return clamp(px * u_ratio + 0.5, 0.0, 1.0);
}
`;

export const NEEDLE_VERTEX = `${PLACE}
in vec2 a_start;
in vec2 a_along;
in float a_widthPx;
in vec4 a_color;
in uint a_flags;
uniform float u_widthScale;
uniform float u_strongPx;
out vec2 v_px;
flat out vec2 v_extentPx;
flat out vec4 v_color;
void main() {
  vec2 along = a_along * u_worldPx;
  float lengthPx = length(along);
  float halfPx = ((a_flags & 2u) != 0u ? u_strongPx : a_widthPx) * u_widthScale / 2.0;
  vec2 ahead = along / lengthPx;
  v_extentPx = vec2(lengthPx, halfPx);
  v_px = mix(vec2(-0.5, -halfPx - 0.5), vec2(lengthPx + 0.5, halfPx + 0.5), cornerOf(gl_VertexID));
  v_color = a_color;
  vec2 px = (a_start - u_centre) * u_worldPx + ahead * v_px.x + vec2(-ahead.y, ahead.x) * v_px.y;
  gl_Position = (a_flags & 1u) != 0u ? placed(px) : NOWHERE;
}`;

export const NEEDLE_FRAGMENT = `${SOFT}
in vec2 v_px;
flat in vec2 v_extentPx;
flat in vec4 v_color;
void main() {
  color = v_color * inside(v_extentPx.y - abs(v_px.y)) * inside(min(v_px.x, v_extentPx.x - v_px.x));
}`;

export const DOT_VERTEX = `${PLACE}
in vec2 a_at;
in uint a_flags;
uniform vec2 u_radiusPx;
uniform float u_rimPx;
uniform vec4 u_fills[2];
uniform vec4 u_rims[2];
out vec2 v_px;
flat out float v_radiusPx;
flat out vec4 v_fill;
flat out vec4 v_rim;
void main() {
  bool isShown = (a_flags & 1u) != 0u;
  v_radiusPx = isShown ? u_radiusPx.x : u_radiusPx.y;
  v_fill = u_fills[(a_flags & 4u) != 0u ? 0 : 1];
  v_rim = u_rims[isShown ? 0 : 1];
  v_px = (cornerOf(gl_VertexID) * 2.0 - 1.0) * (v_radiusPx + u_rimPx + 0.5);
  gl_Position = placed((a_at - u_centre) * u_worldPx + v_px);
}`;

export const DOT_FRAGMENT = `${SOFT}
uniform float u_rimPx;
in vec2 v_px;
flat in float v_radiusPx;
flat in vec4 v_fill;
flat in vec4 v_rim;
void main() {
  float distancePx = length(v_px);
  color = mix(v_rim, v_fill, inside(v_radiusPx - distancePx)) * inside(v_radiusPx + u_rimPx - distancePx);
}`;
