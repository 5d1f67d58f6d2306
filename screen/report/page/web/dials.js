// Torsions as dials and ring shapes as maps: each conformer is a hand, or a
// marker, and its length or size tells the population.

const size = 190, height = 212, middle = 95, rim = 66;

page.dials = (slot, ligand) => {
  const { data } = ligand, looks = page.looks(data);
  const box = page.element("div", { class: "dials" });
  const most = Math.max(...data.conformers.map((c) => c.populations[0]));
  const weight = (k) => Math.sqrt(data.conformers[k].populations[0] / most);
  const all = [
    ...data.turns.map((t) => ({ title: t.name, atoms: t.atoms, words: turnWords(t), draw: () => dial(t, ligand, looks, weight) })),
    ...data.rings.map((r) => ({ title: r.name, atoms: r.atoms, words: ringWords(r), draw: () => (r.theta ? globe : wheel)(r, ligand, looks, weight) })),
  ];
  if (all.length === 0) return;
  for (const d of all) {
    const svg = page.canvas(size, height, `${d.words} of ${d.title}`);
    const draw = () => svg.replaceChildren(...d.draw());
    draw();
    ligand.onSelect.push(draw);
    const one = page.figure(d.title, svg, { note: d.words });
    one.tabIndex = 0;
    for (const e of ["focusin", "pointerenter"]) one.addEventListener(e, () => ligand.mark(d.atoms));
    for (const e of ["focusout", "pointerleave"]) one.addEventListener(e, () => ligand.mark([]));
    box.append(one);
  }
  slot.append(page.element("section", { class: "turning" }, page.element("h3", {}, "Torsions and rings"),
    page.element("p", { class: "fine" }, "A hand or marker is a conformer; long or large ones are populated. Point at a figure, or move to it by the tab key, to see its atoms in the structure." +
      (data.figures_left_out > 0 ? ` ${data.figures_left_out} more torsions or rings are not drawn.` : "")), box));
};

const turnWords = (t) => (t.ring ? "torsion along the ring" : "torsion") + (t.period > 1 ? `, ${t.period} angles mean the same` : "");
const ringWords = (r) => (r.theta ? "ring of six: θ from chair to chair, φ round it" : "ring of five: amplitude and phase");

const point = (degrees, r) => [middle + r * Math.sin(degrees * Math.PI / 180), middle - r * Math.cos(degrees * Math.PI / 180)];

function circle(r, name) { return page.svg("circle", { cx: middle, cy: middle, r, class: name }); }

function around(labels) {
  return labels.map(([angle, words]) => {
    const [x, y] = point(angle, rim + 15);
    return page.text(x.toFixed(1), (y + 4).toFixed(1), words, { "text-anchor": "middle", class: "tick" });
  });
}

// order puts the chosen conformer last, and thereby on top.
const order = (ligand) => {
  const ks = ligand.data.conformers.map((c, k) => k).reverse().filter((k) => k !== ligand.selected);
  return [...ks, ligand.selected];
};

function dial(t, ligand, looks, weight) {
  const parts = [circle(rim, "rim"), ...around([[0, "0°"], [90, "90"], [180, "180"], [-90, "−90"]])];
  for (let a = 0; a < 360; a += 30) {
    const [x, y] = point(a, rim), [u, v] = point(a, rim - (a % 90 === 0 ? 8 : 4));
    parts.push(page.svg("path", { d: `M${x.toFixed(1)} ${y.toFixed(1)}L${u.toFixed(1)} ${v.toFixed(1)}`, class: "notch" }));
  }
  for (const k of order(ligand)) {
    const c = ligand.data.conformers[k], look = looks.get(c.family), mine = k === ligand.selected;
    const g = page.svg("g", { class: mine ? "hand chosen" : "hand", "data-k": k, click: () => ligand.select(k) },
      page.svg("title", {}, `conformer ${c.number}: ${t.angles[k]}°`));
    for (let n = 0; n < t.period; n++) {
      const [x, y] = point(t.angles[k] + 360 * n / t.period, rim * (0.25 + 0.75 * weight(k)));
      g.append(page.svg("path", { d: `M${middle} ${middle}L${x.toFixed(1)} ${y.toFixed(1)}`, stroke: look.colour, "stroke-dasharray": look.dash || null }), page.marker(look, x.toFixed(1), y.toFixed(1), mine ? 1.1 : 0.75));
    }
    parts.push(g);
  }
  parts.push(page.text(middle, height - 6, `${ligand.data.conformers[ligand.selected].number}: ${String(t.angles[ligand.selected]).replace("-", "−")}°`, { "text-anchor": "middle", class: "value" }));
  return parts;
}

// wheel is the ring of five: the phase about the centre, the amplitude outward.
function wheel(r, ligand, looks, weight) {
  const far = Math.max(0.5, ...r.amplitude);
  const parts = [circle(rim, "rim"), circle(rim / 2, "rim thin"), ...around([[0, "0°"], [90, "90"], [180, "180"], [-90, "270"]]),
    page.text(middle + 3, middle - rim + 12, `${far.toFixed(2)} Å`, { class: "tick" })];
  for (const k of order(ligand)) parts.push(dot(ligand, looks, weight, k, ...point(r.phase[k], rim * r.amplitude[k] / far), `q ${r.amplitude[k].toFixed(2)} Å, φ ${r.phase[k]}°`));
  const k = ligand.selected;
  parts.push(page.text(middle, height - 6, `q ${r.amplitude[k].toFixed(2)} Å, φ ${r.phase[k]}°`, { "text-anchor": "middle", class: "value" }));
  return parts;
}

// globe is the ring of six as a map: θ downward from chair to chair, φ across.
function globe(r, ligand, looks, weight) {
  const x = (phi) => 34 + phi / 360 * (size - 46), y = (theta) => 16 + theta / 180 * 128;
  const parts = [page.svg("rect", { x: x(0), y: y(0), width: x(360) - x(0), height: 128, class: "rim" }),
    page.svg("path", { d: `M${x(0)} ${y(90)}H${x(360)}`, class: "grid" })];
  for (const t of [0, 90, 180]) parts.push(page.text(x(0) - 5, y(t) + 4, `${t}°`, { "text-anchor": "end", class: "tick" }));
  for (const p of [0, 180, 360]) parts.push(page.text(x(p), y(180) + 14, `${p}°`, { "text-anchor": p === 360 ? "end" : p === 0 ? "start" : "middle", class: "tick" }));
  parts.push(page.text(x(180), y(0) + 13, "chair", { "text-anchor": "middle", class: "place" }), page.text(x(180), y(90) - 4, "boat, twist", { "text-anchor": "middle", class: "place" }),
    page.text(x(180), y(180) - 6, "chair", { "text-anchor": "middle", class: "place" }));
  for (const k of order(ligand)) parts.push(dot(ligand, looks, weight, k, x(r.phase[k]), y(r.theta[k]), `Q ${r.amplitude[k].toFixed(2)} Å, θ ${r.theta[k]}°, φ ${r.phase[k]}°`));
  const k = ligand.selected;
  parts.push(page.text(middle, height - 22, `Q ${r.amplitude[k].toFixed(2)} Å, θ ${r.theta[k]}°, φ ${r.phase[k]}°`, { "text-anchor": "middle", class: "value" }));
  return parts;
}

function dot(ligand, looks, weight, k, x, y, words) {
  const c = ligand.data.conformers[k], mine = k === ligand.selected;
  return page.svg("g", { class: mine ? "hand chosen" : "hand", "data-k": k, click: () => ligand.select(k) },
    page.svg("title", {}, `conformer ${c.number}: ${words}`), page.marker(looks.get(c.family), x.toFixed(1), y.toFixed(1), 0.5 + 0.9 * weight(k)));
}
