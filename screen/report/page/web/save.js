// Every figure can be taken along, as SVG or as PNG.

// figure puts a drawing under a title, with its buttons. draw returns the SVG to
// save; without it the one that is shown is saved.
page.figure = (title, shown, { draw = () => shown, note = "", controls = [] } = {}) => {
  const name = () => `${page.current.id} ${title}`.replace(/[^A-Za-z0-9._-]+/g, "-").slice(0, 80);
  const button = (kind, save) =>
    page.element("button", { type: "button", class: "save", click: save, "aria-label": `Save ${title} as ${kind}` }, kind);
  return page.element("figure", { class: "figure" },
    page.element("figcaption", {},
      page.element("h3", {}, title), ...controls,
      page.element("span", { class: "saves" }, "Save ",
        button("SVG", () => hand(new Blob([standalone(draw())], { type: "image/svg+xml" }), `${name()}.svg`)),
        button("PNG", () => paint(draw()).then((blob) => hand(blob, `${name()}.png`))))),
    shown,
    note ? page.element("p", { class: "fine" }, note) : null);
};

const kept = ["fill", "stroke", "stroke-width", "stroke-dasharray", "stroke-linecap", "stroke-linejoin", "opacity",
  "font-size", "font-family", "font-weight", "text-anchor", "dominant-baseline", "visibility", "display"];

// standalone writes an SVG with the styles that the page gave it.
function standalone(svg) {
  const guest = !svg.isConnected;
  if (guest) document.body.append(svg);
  const copy = svg.cloneNode(true);
  const from = [svg, ...svg.querySelectorAll("*")], to = [copy, ...copy.querySelectorAll("*")];
  from.forEach((node, i) => {
    const style = getComputedStyle(node);
    for (const key of kept) to[i].style.setProperty(key, style.getPropertyValue(key));
  });
  const ground = getComputedStyle(document.documentElement).getPropertyValue("--panel").trim() || "#fff";
  copy.insertBefore(page.svg("rect", { width: "100%", height: "100%", fill: ground }), copy.firstChild);
  const box = (svg.getAttribute("viewBox") || "0 0 400 300").split(/\s+/);
  copy.setAttribute("width", box[2]);
  copy.setAttribute("height", box[3]);
  copy.removeAttribute("style");
  if (guest) svg.remove();
  return new XMLSerializer().serializeToString(copy);
}

// paint makes a PNG of three pixels a unit.
function paint(svg) {
  const text = standalone(svg);
  const box = (svg.getAttribute("viewBox") || "0 0 400 300").split(/\s+/).map(Number);
  return new Promise((resolve, reject) => {
    const image = new Image();
    image.onload = () => {
      const canvas = page.element("canvas", { width: Math.round(3 * box[2]), height: Math.round(3 * box[3]) });
      canvas.getContext("2d").drawImage(image, 0, 0, canvas.width, canvas.height);
      canvas.toBlob(resolve, "image/png");
    };
    image.onerror = () => reject(new Error("the figure could not be painted"));
    image.src = "data:image/svg+xml;charset=utf-8," + encodeURIComponent(text);
  });
}

function hand(blob, name) {
  const url = URL.createObjectURL(blob);
  page.saved = { name, size: blob.size, type: blob.type };
  const link = page.element("a", { href: url, download: name });
  document.body.append(link);
  link.click();
  link.remove();
  setTimeout(() => URL.revokeObjectURL(url), 10000);
}
