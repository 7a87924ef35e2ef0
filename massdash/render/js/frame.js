/* Frames from Python: typed arrays out of one buffer, and each chart's marks made whole. See frame.py. */

const ARRAY_TYPES = { f4: Float32Array, f8: Float64Array, u1: Uint8Array };

/** The columns of a frame; ``buffer`` is a DataView into the message. */
function readColumns({ columns, buffer }) {
  return columns.map(([kind, offset, count]) => {
    const Type = ARRAY_TYPES[kind],
      start = buffer.byteOffset + offset;
    return new Type(buffer.buffer.slice(start, start + count * Type.BYTES_PER_ELEMENT)); // a copy, as offsets must align
  });
}

const COLUMN_NAMES = { line: ["x", "y"], band: ["x", "low", "high"], map: ["values"], span: [], rule: [], point: [] };

/** A mark of the structure with its values of this frame. */
function wholeMark(structure, moment, columns) {
  const mark = { ...structure, ...moment };
  for (const name of COLUMN_NAMES[mark.kind]) mark[name] = columns[mark[name]];
  return mark;
}

/** Whether a frame belongs to a structure: the same number of charts and of marks in each. */
function fits(structure, frame) {
  const { charts = [] } = structure;
  return (
    frame.charts?.length === charts.length &&
    charts.every((chart, i) => chart.marks.length === frame.charts[i].marks.length)
  );
}
