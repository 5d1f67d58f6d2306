// One ligand at a time: the part of the address after # says which.

page.run = JSON.parse(document.querySelector("#data-run").textContent);
page.current = null;

const detail = document.querySelector("#detail"), overview = document.querySelector("#overview");

// open fills the detail part from the text that a reader without scripts sees,
// and hangs the figures into it.
page.open = (n) => {
  const source = document.querySelector(`noscript.ligand[data-n="${n}"]`);
  close();
  if (!source) { detail.hidden = true; overview.hidden = false; return; }
  detail.innerHTML = source.textContent; // our own markup: the template has escaped all text in it
  detail.hidden = false;
  overview.hidden = true;
  const article = detail.querySelector("article");
  article.prepend(trail(n));
  article.removeAttribute("id"); // or the browser would scroll past the trail
  const ligand = { n, id: article.querySelector("h2").textContent, selected: 0, onSelect: [], whenDrawn: [], redraw: () => {} };
  page.current = ligand;
  const text = document.querySelector(`#data-${n}`);
  const scene = article.querySelector('[data-figure="scene"]');
  if (!text) {
    const slot = page.element("div", { class: "slot" });
    article.querySelector("header.ligand-head").after(slot);
    page.structure(slot, ligand);
  } else {
    ligand.data = JSON.parse(text.textContent);
    ligand.shapes = unpack(ligand.data);
    ligand.onCarbon = onCarbon(ligand.data);
    ligand.select = (k) => {
      if (k < 0 || k >= ligand.data.conformers.length || k === ligand.selected) return;
      ligand.selected = k;
      for (const use of ligand.onSelect) use();
      ligand.redraw();
    };
    page.structure(scene, ligand);
    page.conformers(article, ligand);
    page.scene(scene, ligand);
    for (const name of ["levels", "populations", "dials"]) page[name](article.querySelector(`[data-figure="${name}"]`), ligand);
  }
  article.querySelector("h2").focus({ preventScroll: true });
  scrollTo(0, 0);
};

// close gives the drawing context of the last ligand back: browsers have few.
function close() {
  const canvas = detail.querySelector("canvas");
  const gl = canvas && (canvas.getContext("webgl2") || canvas.getContext("webgl"));
  const lose = gl && gl.getExtension("WEBGL_lose_context");
  page.current = null;
  detail.replaceChildren();
  if (lose) lose.loseContext();
}

// trail leads back to the list and on to the next ligand in its order.
function trail(n) {
  const list = page.visible(), at = list.indexOf(n);
  const link = (to, words) => (to ? page.element("a", { href: `#ligand-${to}` }, words) : page.element("span", { class: "off" }, words));
  return page.element("nav", { class: "trail", "aria-label": "Ligands" },
    page.element("a", { href: "#overview" }, "← All ligands"), link(at > 0 && list[at - 1], "Previous ligand"), link(at >= 0 && list[at + 1], "Next ligand"));
}

// unpack reads 16-bit numbers, low byte first, into angstrom.
function unpack(data) {
  const bytes = Uint8Array.from(atob(data.coordinates), (c) => c.charCodeAt(0));
  const view = new DataView(bytes.buffer), size = 3 * data.elements.length, shapes = [];
  for (let at = 0; at + 2 * size <= bytes.length; at += 2 * size) {
    shapes.push(Float64Array.from({ length: size }, (_, k) => view.getInt16(at + 2 * k, true) * data.step));
  }
  return shapes;
}

function onCarbon(data) {
  const on = data.elements.map(() => false);
  for (let k = 0; k < data.bonds.length; k += 3) {
    const [a, b] = [data.bonds[k], data.bonds[k + 1]];
    if (data.elements[a] === 6) on[b] = true;
    if (data.elements[b] === 6) on[a] = true;
  }
  return on;
}

const follow = () => {
  const found = /^#ligand-(\d+)$/.exec(location.hash);
  if (found) page.open(Number(found[1]));
  else { close(); detail.hidden = true; overview.hidden = false; }
};

for (const part of document.querySelectorAll(".needs-script")) if (part !== detail) part.hidden = false;
document.documentElement.classList.add("scripted");
page.overview();
addEventListener("hashchange", follow);
addEventListener("beforeprint", () => page.current && page.current.forPrint && page.current.forPrint());
matchMedia("(prefers-color-scheme: dark)").addEventListener("change", () => {
  if (!page.current) return;
  for (const use of page.current.onSelect) use();
  page.current.redraw();
});
follow();
window.torsieveReport = page; // for those who look at it from the console, and for tests
