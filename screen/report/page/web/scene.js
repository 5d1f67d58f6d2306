// The ensemble in space: by 3Dmol where there is WebGL, else as an SVG that
// turns the same way.

page.hasWebGL = () => {
  try {
    const canvas = document.createElement("canvas");
    return Boolean(window.$3Dmol && (canvas.getContext("webgl2") || canvas.getContext("webgl")));
  } catch (error) { return false; }
};

const modes = [["one", "this shape"], ["family", "its family"], ["lowest", "the lowest of each family"], ["all", "all shapes"]];

page.scene = (slot, ligand) => {
  const { data } = ligand, looks = page.looks(data);
  const state = { mode: "one", hydrogens: false, turn: page.across(ligand.shapes[0]), marked: [] };
  const stage = page.element("div", { class: "stage", tabindex: "0", role: "application",
    "aria-label": "The molecule in space. Arrow keys turn it, plus and minus change its size, page up and page down change the conformer." });
  const caption = page.element("p", { class: "now", "aria-live": "polite" });
  const viewer = page.hasWebGL() ? gl(stage) : null;
  const legend = looks.size > 1 ? families(ligand, looks) : null;
  const print = page.element("div", { class: "for-print", "aria-hidden": "true" });

  const hidden = () => data.elements.map((z, i) => z === 1 && !state.hydrogens && ligand.onCarbon[i]);
  const shown = () => {
    const k = ligand.selected, mine = data.conformers[k].family, seen = new Set();
    const list = [];
    for (let n = 0; n < ligand.shapes.length; n++) {
      const f = data.conformers[n].family, first = !seen.has(f);
      seen.add(f);
      const taken = state.mode === "all" || (state.mode === "family" && f === mine) || (state.mode === "lowest" && first);
      if (n !== k && taken) list.push(n);
    }
    return [k, ...list].filter((n) => n < ligand.shapes.length).map((n) => ({
      n, xyz: ligand.shapes[n], back: n !== k,
      colour: state.mode === "one" ? null : looks.get(data.conformers[n].family).colour,
      dash: n !== k ? looks.get(data.conformers[n].family).dash : null,
    }));
  };
  const turnNow = () => (viewer ? page.matrixOf(viewer.getView().slice(4, 8)) : state.turn);
  const flat = () => page.flat(data, shown(), turnNow(), hidden(), `conformer ${data.conformers[ligand.selected].number} of ${ligand.id}`);

  const draw = () => {
    const c = data.conformers[ligand.selected];
    caption.replaceChildren(`Conformer ${c.number}, rank ${ligand.selected + 1}: ${page.percent(c.populations[0])}` +
      (c.low ? ` (${page.percent(c.low[0])} to ${page.percent(c.high[0])})` : "") + `, ${c.final.toFixed(2)} kcal/mol, family ${c.family}` +
      (ligand.selected >= ligand.shapes.length ? ". Its coordinates are left out of this page." : ""));
    if (viewer) paint(viewer, data, shown(), hidden(), state.marked);
    else stage.replaceChildren(flat());
    for (const use of ligand.whenDrawn) use(state.marked);
  };
  const turn = (axis, degrees) => {
    if (viewer) { viewer.rotate(degrees, axis); viewer.render(); return; }
    state.turn = page.turnBy(state.turn, axis, degrees * Math.PI / 180);
    draw();
  };
  const whole = () => { if (viewer) { viewer.zoomTo(); viewer.zoom(1.15); viewer.render(); } };
  const grow = (factor) => { if (viewer) { viewer.zoom(factor); viewer.render(); } };
  const keys = {
    ArrowLeft: () => turn("y", -15), ArrowRight: () => turn("y", 15), ArrowUp: () => turn("x", -15), ArrowDown: () => turn("x", 15),
    "+": () => grow(1.2), "=": () => grow(1.2), "-": () => grow(1 / 1.2),
    PageDown: () => ligand.select(ligand.selected + 1), PageUp: () => ligand.select(ligand.selected - 1),
  };
  stage.addEventListener("keydown", (e) => {
    if (!keys[e.key] || e.ctrlKey || e.metaKey || e.altKey) return;
    e.preventDefault();
    keys[e.key]();
  });
  if (!viewer) drag(stage, turn);

  const choose = page.element("select", { change: (e) => { state.mode = e.target.value; draw(); whole(); }, id: "overlay" },
    ...modes.map(([value, words]) => page.element("option", { value }, words)));
  const hydrogens = page.element("input", { type: "checkbox", change: (e) => { state.hydrogens = e.target.checked; draw(); whole(); } });
  const step = (by, words) => page.element("button", { type: "button", click: () => ligand.select(ligand.selected + by) }, words);
  slot.append(page.figure("Shapes in space", page.element("div", {}, stage, print, caption, legend), {
    draw: flat,
    controls: [page.element("span", { class: "controls" }, step(-1, "Previous"), step(1, "Next"),
      page.element("label", {}, "Show ", choose), page.element("label", { class: "check" }, hydrogens, " all hydrogens"))],
    note: (viewer ? "" : "This browser has no WebGL: the view is drawn flat. ") +
      "Drag or use the arrow keys to turn. " + (looks.size > 1 ? "In overlays the carbons have the colour of their family; " : "") +
      `superposed on the first conformer${ligand.shapes.length < data.conformers.length ? `; the first ${ligand.shapes.length} are on this page` : ""}.`,
  }));
  if (viewer) {
    draw();
    viewer.resize();
    viewer.zoomTo();
    const view = viewer.getView();
    viewer.setView([...view.slice(0, 4), ...quaternion(state.turn)]);
    whole();
  }
  ligand.redraw = draw;
  ligand.mark = (atoms) => { state.marked = atoms; draw(); };
  ligand.forPrint = () => print.replaceChildren(flat());
  ligand.viewer = viewer;
  draw();
};

// families lists the families with their looks; each leads to its lowest shape.
function families(ligand, looks) {
  const { conformers } = ligand.data;
  return page.element("ul", { class: "families", "aria-label": "Families of shapes" }, ...[...looks].map(([family, look]) => {
    const members = conformers.filter((c) => c.family === family);
    const sum = members.reduce((p, c) => p + c.populations[0], 0);
    return page.element("li", {}, page.element("button", { type: "button", click: () => ligand.select(conformers.indexOf(members[0])) },
      page.svg("svg", { viewBox: "-6 -6 12 12", width: 13, height: 13, "aria-hidden": "true" }, page.marker(look, 0, 0)),
      ` family ${family}: ${members.length} ${members.length === 1 ? "shape" : "shapes"}, ${page.percent(sum)}`));
  }));
}

function gl(stage) {
  try {
    return window.$3Dmol.createViewer(stage, { backgroundAlpha: 0, antialias: true, disableFog: false });
  } catch (error) { return null; }
}

function paint(viewer, data, shapes, hidden, marked) {
  viewer.removeAllModels();
  viewer.removeAllShapes();
  for (const s of shapes) {
    const model = viewer.addModel();
    model.addAtoms(atomsOf(data, s, hidden));
    model.setStyle({}, s.back ? { stick: { radius: 0.07, singleBonds: true } } : { stick: { radius: 0.13 }, sphere: { scale: 0.23 } });
  }
  if (shapes.length > 0) for (const i of marked) {
    const x = shapes[0].xyz;
    viewer.addSphere({ center: { x: x[3 * i], y: x[3 * i + 1], z: x[3 * i + 2] }, radius: 0.55, color: "#e69f00", opacity: 0.55 });
  }
  viewer.render();
}

function atomsOf(data, s, hidden) {
  const place = new Map(), atoms = [];
  data.elements.forEach((z, i) => {
    if (hidden[i]) return;
    place.set(i, atoms.length);
    atoms.push({ elem: page.symbol(z) || "C", x: s.xyz[3 * i], y: s.xyz[3 * i + 1], z: s.xyz[3 * i + 2], serial: i, bonds: [], bondOrder: [],
      color: (z === 6 && s.colour) || page.atomColour(z) });
  });
  for (let k = 0; k < data.bonds.length; k += 3) {
    const a = place.get(data.bonds[k]), b = place.get(data.bonds[k + 1]);
    if (a === undefined || b === undefined) continue;
    atoms[a].bonds.push(b); atoms[a].bondOrder.push(data.bonds[k + 2]);
    atoms[b].bonds.push(a); atoms[b].bondOrder.push(data.bonds[k + 2]);
  }
  return atoms;
}

function drag(stage, turn) {
  let last = null;
  stage.addEventListener("pointerdown", (e) => { last = [e.clientX, e.clientY]; stage.setPointerCapture(e.pointerId); });
  stage.addEventListener("pointermove", (e) => {
    if (!last) return;
    turn("y", (e.clientX - last[0]) / 2);
    turn("x", (e.clientY - last[1]) / 2);
    last = [e.clientX, e.clientY];
  });
  for (const end of ["pointerup", "pointercancel"]) stage.addEventListener(end, () => { last = null; });
}

// quaternion of a matrix of nine numbers; the largest of four forms.
function quaternion(m) {
  const trace = m[0] + m[4] + m[8];
  let q;
  if (trace > 0) q = [m[7] - m[5], m[2] - m[6], m[3] - m[1], 1 + trace];
  else if (m[0] > m[4] && m[0] > m[8]) q = [1 + m[0] - m[4] - m[8], m[1] + m[3], m[2] + m[6], m[7] - m[5]];
  else if (m[4] > m[8]) q = [m[1] + m[3], 1 + m[4] - m[0] - m[8], m[5] + m[7], m[2] - m[6]];
  else q = [m[2] + m[6], m[5] + m[7], 1 + m[8] - m[0] - m[4], m[3] - m[1]];
  const r = Math.hypot(...q);
  return q.map((v) => v / r);
}
