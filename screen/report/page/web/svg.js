// Elements, colours and shapes that all figures share.

page.element = (tag, attributes = {}, ...children) => fill(document.createElement(tag), attributes, children);

page.svg = (tag, attributes = {}, ...children) =>
  fill(document.createElementNS("http://www.w3.org/2000/svg", tag), attributes, children);

// fill sets attributes, or listeners where a value is a function. Children that
// are no nodes become text, never markup.
function fill(node, attributes, children) {
  for (const [name, value] of Object.entries(attributes)) {
    if (value === null || value === undefined || value === false) continue;
    if (typeof value === "function") node.addEventListener(name, value);
    else node.setAttribute(name, value === true ? "" : value);
  }
  node.append(...children.filter((c) => c !== null && c !== undefined));
  return node;
}

page.canvas = (width, height, label, ...children) =>
  page.svg("svg", { viewBox: `0 0 ${width} ${height}`, width, height, role: "img", "aria-label": label }, ...children);

// widthOf is how wide a figure in a slot may be, so that its letters keep their
// size on a narrow screen.
page.widthOf = (slot) => Math.round(Math.max(300, Math.min(900, (slot.clientWidth || 700) - 34)));

page.text = (x, y, words, attributes = {}) => page.svg("text", { x, y, ...attributes }, words);

// Families of shapes have a colour (M. Okabe, K. Ito, palette for all kinds of
// colour vision), a marker and a dash, so that no two of them differ in colour
// alone.
// On a dark page the darker ones are lifted.
const colours = ["#0072b2", "#d55e00", "#009e73", "#cc79a7", "#e69f00", "#56b4e9"];
const lifted = ["#4aa8e0", "#f0803c", "#2cc59a", "#e3a3c8", "#f0b93c", "#9ad4f5"];
const dashes = ["", "7 3", "2 3", "9 3 2 3"];
const outlines = [
  "M-4 0a4 4 0 1 0 8 0a4 4 0 1 0 -8 0", "M-3.6 -3.6h7.2v7.2h-7.2z", "M0 -4.6l4.4 7.8h-8.8z",
  "M0 -5l4 5l-4 5l-4 -5z", "M-4.4 -3.2h8.8l-4.4 7.8z",
];

// looks gives each family of a ligand its look, in the order in which families
// appear by rank.
page.looks = (data) => {
  const looks = new Map();
  for (const c of data.conformers) {
    if (looks.has(c.family)) continue;
    const n = looks.size;
    looks.set(c.family, {
      get colour() { return (page.isDark() ? lifted : colours)[n % colours.length]; }, marker: outlines[n % outlines.length], dash: dashes[n % dashes.length], place: n,
    });
  }
  return looks;
};

page.marker = (look, x, y, size = 1) =>
  page.svg("path", { d: look.marker, transform: `translate(${x} ${y}) scale(${size})`, fill: look.colour, class: "marker" });

page.percent = (p) => {
  if (p < 0.0005) return "< 0.1 %";
  if (p >= 0.9995 && p < 1) return "> 99.9 %";
  return p < 0.0995 || (p >= 0.9905 && p < 0.9995) ? `${(100 * p).toFixed(1)} %` : `${Math.round(100 * p)} %`;
};

page.isDark = () => matchMedia("(prefers-color-scheme: dark)").matches;

// Colours of the elements: light and dark page.
const atoms = {
  1: ["#8d99a6", "#cfd6dd"], 6: ["#646d78", "#a8b0ba"], 7: ["#0072b2", "#56b4e9"], 8: ["#d55e00", "#f0803c"],
  9: ["#009e73", "#2cc59a"], 15: ["#b46500", "#e69f00"], 16: ["#b08a00", "#f0d442"], 17: ["#009e73", "#2cc59a"],
  35: ["#a34a7c", "#cc79a7"], 53: ["#7a3f96", "#b98ad0"],
};
page.atomColour = (z, dark = page.isDark()) => (atoms[z] || ["#7a6a58", "#c0ad97"])[dark ? 1 : 0];
const symbols = { 1: "H", 5: "B", 6: "C", 7: "N", 8: "O", 9: "F", 14: "Si", 15: "P", 16: "S", 17: "Cl", 34: "Se", 35: "Br", 53: "I" };
page.symbol = (z) => symbols[z] || "";
