/** A field of each mark's record: floats, or four bytes from 0 to 1, from a word of the record on. */
export interface Attribute {
  name: string;
  size: number;
  word: number;
  isBytes?: boolean;
}

/** One kind of mark: a rectangle for each record, shaped and coloured by its shaders. */
export interface Drawing {
  fill(records: Float32Array): void;
  /** A byte for each record, which the vertex shader reads as `a_flags`. */
  flag(flags: Uint8Array): void;
  /** Numbers of each uniform of one or two, or of four times as many as it has elements. */
  draw(uniforms: Record<string, readonly number[]>): void;
  remove(): void;
}

const CORNERS = 4;
/** Two triangles over the corners 0 to 3 of a rectangle. */
const TRIANGLES = [0, 1, 2, 2, 1, 3];

export function makeDrawing(gl: WebGL2RenderingContext, vertex: string, fragment: string, attributes: readonly Attribute[], words: number): Drawing {
  const program = programOf(gl, vertex, fragment);
  const array = gl.createVertexArray();
  const [recordBuffer, flagBuffer, indexBuffer] = [gl.createBuffer(), gl.createBuffer(), gl.createBuffer()];
  let count = 0;
  let indexed = 0;

  gl.bindVertexArray(array);
  gl.bindBuffer(gl.ARRAY_BUFFER, recordBuffer);
  for (const { name, size, word, isBytes } of attributes) {
    const at = gl.getAttribLocation(program, name);
    gl.enableVertexAttribArray(at);
    gl.vertexAttribPointer(at, size, isBytes ? gl.UNSIGNED_BYTE : gl.FLOAT, Boolean(isBytes), words * 4, word * 4);
  }
  gl.bindBuffer(gl.ARRAY_BUFFER, flagBuffer);
  const flagsAt = gl.getAttribLocation(program, "a_flags");
  gl.enableVertexAttribArray(flagsAt);
  gl.vertexAttribIPointer(flagsAt, 1, gl.UNSIGNED_BYTE, 1, 0);
  gl.bindBuffer(gl.ELEMENT_ARRAY_BUFFER, indexBuffer);
  gl.bindVertexArray(null);

  return {
    fill(records) {
      gl.bindBuffer(gl.ARRAY_BUFFER, recordBuffer);
      gl.bufferData(gl.ARRAY_BUFFER, forCorners(new Uint8Array(records.buffer), words * 4), gl.DYNAMIC_DRAW);
      count = records.length / words;
      if (count <= indexed) return;
      indexed = count;
      gl.bindVertexArray(array);
      gl.bufferData(gl.ELEMENT_ARRAY_BUFFER, trianglesOf(count), gl.STATIC_DRAW);
      gl.bindVertexArray(null);
    },
    flag(flags) {
      gl.bindBuffer(gl.ARRAY_BUFFER, flagBuffer);
      gl.bufferData(gl.ARRAY_BUFFER, forCorners(flags, 1), gl.DYNAMIC_DRAW);
    },
    draw(uniforms) {
      gl.useProgram(program);
      for (const [name, values] of Object.entries(uniforms)) {
        const at = gl.getUniformLocation(program, name);
        if (values.length === 1) gl.uniform1fv(at, values);
        else if (values.length === 2) gl.uniform2fv(at, values);
        else gl.uniform4fv(at, values);
      }
      gl.bindVertexArray(array);
      gl.drawElements(gl.TRIANGLES, count * TRIANGLES.length, gl.UNSIGNED_INT, 0);
      gl.bindVertexArray(null);
    },
    remove() {
      gl.deleteVertexArray(array);
      gl.deleteBuffer(recordBuffer);
      gl.deleteBuffer(flagBuffer);
      gl.deleteBuffer(indexBuffer);
      gl.deleteProgram(program);
    },
  };
}

/** Each record once for each corner: drivers, those without a graphics card above all, are slow at thousands of tiny instances. */
function forCorners(records: Uint8Array, recordBytes: number): Uint8Array {
  const all = new Uint8Array(records.length * CORNERS);
  for (let from = 0; from < records.length; from += recordBytes) {
    const to = from * CORNERS;
    all.set(records.subarray(from, from + recordBytes), to);
    for (let made = recordBytes; made < recordBytes * CORNERS; made *= 2) all.copyWithin(to + made, to, to + made);
  }
  return all;
}

function trianglesOf(count: number): Uint32Array {
  return Uint32Array.from({ length: count * TRIANGLES.length }, (_, at) => Math.floor(at / TRIANGLES.length) * CORNERS + TRIANGLES[at % TRIANGLES.length]);
}

function programOf(gl: WebGL2RenderingContext, vertex: string, fragment: string): WebGLProgram {
  const program = gl.createProgram();
  for (const [type, source] of [[gl.VERTEX_SHADER, vertex], [gl.FRAGMENT_SHADER, fragment]] as const) {
    const shader = gl.createShader(type);
    if (!shader) throw new Error("The map's graphics context is lost.");
    gl.shaderSource(shader, source);
    gl.compileShader(shader);
    gl.attachShader(program, shader);
    gl.deleteShader(shader);
  }
  gl.linkProgram(program);
  if (!gl.getProgramParameter(program, gl.LINK_STATUS) && !gl.isContextLost()) {
    const logs = gl.getAttachedShaders(program)?.map((shader) => gl.getShaderInfoLog(shader)) ?? [];
    throw new Error(`The marks of the map cannot be drawn: ${[gl.getProgramInfoLog(program), ...logs].join(" ")}`);
  }
  return program;
}
