// Populations with their bars, by rank.

const row = 20, left = 150, right = 60, top = 24;

page.populations = (slot, ligand) => {
  const { data } = ligand, looks = page.looks(data), width = page.widthOf(slot);
  let t = 0;
  const n = data.conformers.length, height = top + n * row + 12;
  const most = Math.min(1, Math.max(...data.conformers.flatMap((c) => [...c.populations, ...(c.high || [])])) * 1.02);
  const x = (p) => left + (p / most) * (width - left - right);
  const draw = () => {
    const parts = [];
    const step = width < 480 ? (most > 0.5 ? 0.5 : 0.2) : most > 0.6 ? 0.2 : most > 0.25 ? 0.1 : 0.05;
    for (let p = 0; p <= most + 1e-9; p += step) {
      parts.push(page.svg("path", { d: `M${x(p).toFixed(1)} ${top - 4}V${height - 10}`, class: "grid" }),
        page.text(x(p), top - 9, `${Math.round(100 * p)} %`, { "text-anchor": "middle", class: "tick" }));
    }
    data.conformers.forEach((c, k) => parts.push(line(c, k)));
    svg.replaceChildren(...parts);
  };
  const line = (c, k) => {
    const y = top + (k + 0.5) * row, look = looks.get(c.family);
    const g = page.svg("g", { class: k === ligand.selected ? "population chosen" : "population", "data-k": k, click: () => ligand.select(k) },
      page.svg("rect", { x: 0, y: y - row / 2, width, height: row, class: "catch" }),
      page.text(8, y + 4, `${k + 1}.`, { class: "tick" }),
      page.text(34, y + 4, `conformer ${c.number}`, { class: "name" }),
      page.marker(look, left - 14, y),
      page.svg("rect", { x: left, y: y - 5, width: Math.max(1, x(c.populations[t]) - left).toFixed(1), height: 10, fill: look.colour, class: "bar" }));
    if (c.low) {
      const [a, b] = [x(c.low[t]).toFixed(1), x(c.high[t]).toFixed(1)];
      g.append(page.svg("path", { d: `M${a} ${y}H${b}M${a} ${y - 5}v10M${b} ${y - 5}v10`, class: "error" }));
    }
    g.append(page.text(width - right + 8, y + 4, page.percent(c.populations[t]), { class: "tick" }));
    return g;
  };
  const svg = page.canvas(width, height, `populations of the conformers of ${ligand.id} with error bars`);
  svg.classList.add("populations");
  ligand.onSelect.push(draw);
  draw();
  const choose = data.temperatures.length < 2 ? [] : [page.element("label", {}, "at ",
    page.element("select", { change: (e) => { t = Number(e.target.value); draw(); } },
      ...data.temperatures.map((k, i) => page.element("option", { value: i }, `${k} K`))))];
  slot.append(page.figure("Populations", svg, {
    controls: choose,
    note: (data.conformers[0].low ? "The thin bar runs from the 5th to the 95th percentile of what the error of the energies allows. " : "No error is known for this level: no bars. ") +
      "Marker and colour name the family.",
  }));
};
