// The molecule in space as an SVG: for paper, for saving, and for browsers
// without WebGL. Nearer atoms are painted later.

const width = 640, height = 440;

// flat draws shapes, each a list of coordinates in angstrom, turned by a matrix
// of nine numbers row by row. Of each shape: colour of its carbons, and whether
// it stands back.
page.flat = (data, shapes, turn, hidden, label) => {
  const parts = [];
  const turned = shapes.map((s) => project(s.xyz, turn));
  const scale = fit(turned, hidden);
  turned.forEach((at, n) => addShape(parts, data, at, shapes[n], scale, hidden));
  parts.sort((a, b) => a.z - b.z);
  return page.canvas(width, height, label, ...parts.map((p) => p.node));
};

function project(xyz, m) {
  const at = [];
  for (let i = 0; i < xyz.length; i += 3) {
    const [x, y, z] = [xyz[i], xyz[i + 1], xyz[i + 2]];
    at.push([m[0] * x + m[1] * y + m[2] * z, m[3] * x + m[4] * y + m[5] * z, m[6] * x + m[7] * y + m[8] * z]);
  }
  return at;
}

function fit(turned, hidden) {
  let x0 = Infinity, x1 = -Infinity, y0 = Infinity, y1 = -Infinity;
  for (const at of turned) at.forEach(([x, y], i) => {
    if (hidden[i]) return;
    x0 = Math.min(x0, x); x1 = Math.max(x1, x); y0 = Math.min(y0, y); y1 = Math.max(y1, y);
  });
  const unit = Math.min((width - 60) / Math.max(x1 - x0, 1), (height - 60) / Math.max(y1 - y0, 1), 60);
  return ([x, y, z]) => [width / 2 + (x - (x0 + x1) / 2) * unit, height / 2 - (y - (y0 + y1) / 2) * unit, z, unit];
}

function addShape(parts, data, at, shape, scale, hidden) {
  const colour = (i) => (data.elements[i] === 6 && shape.colour) || page.atomColour(data.elements[i]);
  const thick = shape.back ? 0.09 : 0.2;
  for (let k = 0; k < data.bonds.length; k += 3) {
    const [i, j] = [data.bonds[k], data.bonds[k + 1]];
    if (hidden[i] || hidden[j]) continue;
    const p = scale(at[i]), q = scale(at[j]);
    const mid = [(p[0] + q[0]) / 2, (p[1] + q[1]) / 2];
    const line = (a, b, w, extra) => page.svg("path", { d: `M${a[0].toFixed(1)} ${a[1].toFixed(1)}L${b[0].toFixed(1)} ${b[1].toFixed(1)}`,
      "stroke-width": (w * p[3]).toFixed(1), fill: "none", ...extra });
    // The halo sets a bond off from those behind it.
    const far = Math.min(3 * p[2] + q[2], p[2] + 3 * q[2]) / 4;
    if (!shape.back) parts.push({ z: far - 0.02, node: line(p, q, thick + 0.1, { class: "halo" }) });
    for (const [end, a] of [[p, i], [q, j]]) {
      parts.push({ z: far, node: line(end, mid, thick, { stroke: colour(a), "stroke-dasharray": shape.dash || null, "stroke-linecap": "round" }) });
    }
  }
  if (shape.back) return;
  at.forEach((a, i) => {
    if (hidden[i]) return;
    const [x, y, z, unit] = scale(a);
    const r = (data.elements[i] === 1 ? 0.2 : data.elements[i] > 10 ? 0.4 : 0.32) * unit;
    const ball = page.svg("circle", { cx: x.toFixed(1), cy: y.toFixed(1), r: r.toFixed(1), fill: colour(i), class: "ball" });
    const shine = page.svg("circle", { cx: (x - r * 0.3).toFixed(1), cy: (y - r * 0.35).toFixed(1), r: (r * 0.28).toFixed(1), fill: "#fff", opacity: 0.55 });
    parts.push({ z: z + 0.3, node: page.svg("g", {}, ball, shine) });
    if (data.elements[i] !== 6 && data.elements[i] !== 1 && r > 8) {
      parts.push({ z: z + 0.31, node: page.text(x.toFixed(1), (y + r * 0.36).toFixed(1), page.symbol(data.elements[i]),
        { "text-anchor": "middle", "font-size": r.toFixed(1), "font-weight": "bold", fill: "#fff", class: "on-ball" }) });
    }
  });
}

// turnBy multiplies a matrix by a turn about the axis x, y or z of the reader.
page.turnBy = (m, axis, angle) => {
  const c = Math.cos(angle), s = Math.sin(angle);
  const r = { x: [1, 0, 0, 0, c, -s, 0, s, c], y: [c, 0, s, 0, 1, 0, -s, 0, c], z: [c, -s, 0, s, c, 0, 0, 0, 1] }[axis];
  const out = [];
  for (let i = 0; i < 3; i++) for (let j = 0; j < 3; j++) out.push(r[3 * i] * m[j] + r[3 * i + 1] * m[3 + j] + r[3 * i + 2] * m[6 + j]);
  return out;
};

page.matrixOf = ([x, y, z, w]) => [
  1 - 2 * (y * y + z * z), 2 * (x * y - z * w), 2 * (x * z + y * w),
  2 * (x * y + z * w), 1 - 2 * (x * x + z * z), 2 * (y * z - x * w),
  2 * (x * z - y * w), 2 * (y * z + x * w), 1 - 2 * (x * x + y * y)];

// across turns a shape so that it lies flat and wide before the reader: its
// longest axis along x, the next along y.
page.across = (xyz) => {
  const c = [0, 0, 0, 0, 0, 0, 0, 0, 0], n = xyz.length / 3, mean = [0, 0, 0];
  for (let i = 0; i < xyz.length; i++) mean[i % 3] += xyz[i] / n;
  for (let i = 0; i < xyz.length; i += 3) for (let a = 0; a < 3; a++) for (let b = 0; b < 3; b++) c[3 * a + b] += (xyz[i + a] - mean[a]) * (xyz[i + b] - mean[b]);
  const first = longest(c, [1, 0.3, 0.2]);
  const size = Math.hypot(...apply(c, first));
  for (let a = 0; a < 3; a++) for (let b = 0; b < 3; b++) c[3 * a + b] -= size * first[a] * first[b];
  let second = longest(c, Math.abs(first[0]) < 0.8 ? [1, 0, 0] : [0, 1, 0]);
  const along = second[0] * first[0] + second[1] * first[1] + second[2] * first[2];
  second = unit(second.map((v, i) => v - along * first[i]));
  const third = [first[1] * second[2] - first[2] * second[1], first[2] * second[0] - first[0] * second[2], first[0] * second[1] - first[1] * second[0]];
  return [...first, ...second, ...third];
};
const apply = (m, v) => [0, 3, 6].map((r) => m[r] * v[0] + m[r + 1] * v[1] + m[r + 2] * v[2]);
const unit = (v) => { const r = Math.hypot(...v); return r > 1e-9 ? v.map((x) => x / r) : [0, 1, 0]; };
function longest(m, v) {
  for (let k = 0; k < 60; k++) { const next = apply(m, v); if (Math.hypot(...next) < 1e-9) break; v = unit(next); }
  return unit(v);
}
