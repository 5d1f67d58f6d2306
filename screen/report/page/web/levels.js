// Energies by level: what each level of theory changed. A conformer is a line
// from column to column.

const height = 340, left = 60, right = 12, top = 26, bottom = 46;

page.levels = (slot, ligand) => {
  const { data } = ligand, looks = page.looks(data), width = page.widthOf(slot);
  const columns = columnsOf(data);
  const ceiling = ceilingOf(data, columns);
  const half = Math.min(26, width / (4 * columns.length));
  const x = (c) => left + half + 22 + (columns.length === 1 ? 0.5 : c / (columns.length - 1)) * (width - left - right - 2 * half - 44);
  const y = (e) => top + (1 - Math.min(e, ceiling) / ceiling) * (height - top - bottom);

  const track = (energies, attributes, fully) => {
    let d = "", before = false;
    columns.forEach((column, c) => {
      const e = column.of(energies);
      if (e === null || e === undefined) { before = false; return; }
      const over = e > ceiling;
      d += `${before ? "L" : "M"}${(x(c) - half).toFixed(1)} ${y(e).toFixed(1)}` + (over ? `M${(x(c) + half).toFixed(1)} ${y(e).toFixed(1)}` : `L${(x(c) + half).toFixed(1)} ${y(e).toFixed(1)}`);
      before = true;
    });
    return page.svg("path", { d, fill: "none", ...attributes }, fully);
  };
  const draw = () => {
    const parts = [...axes(columns, ceiling, x, y, width)];
    for (const o of data.others) parts.push(track(o, { class: "left-behind" }, page.svg("title", {}, `conformer ${o.number}, left behind`)));
    data.conformers.forEach((c, k) => {
      const look = looks.get(c.family), mine = k === ligand.selected;
      const group = page.svg("g", { class: mine ? "level chosen" : "level", "data-k": k, click: () => ligand.select(k) },
        track(c, { class: "catch" }),
        track(c, { class: "track", stroke: look.colour, "stroke-dasharray": look.dash || null }, page.svg("title", {}, `conformer ${c.number}, family ${c.family}`)));
      columns.forEach((column, n) => {
        const e = column.of(c);
        if (e !== null) group.append(page.marker(look, x(n) - half, y(e), mine ? 1.2 : 0.7));
        if (mine && e !== null) group.append(page.text(x(n), y(e) + (e > ceiling ? 18 : -7), (e > ceiling ? "▲ " : "") + e.toFixed(2), { "text-anchor": "middle", class: "value" }));
      });
      parts.push(group);
    });
    const chosen = parts.findIndex((p) => p.classList.contains("chosen"));
    if (chosen >= 0) parts.push(...parts.splice(chosen, 1)); // on top
    columns.forEach((column, c) => {
      const above = [...data.conformers, ...data.others].filter((q) => column.of(q) > ceiling).length;
      if (above > 0) parts.push(page.text(x(c), top - 12, `▲ ${above} higher`, { "text-anchor": "middle", class: "tick" }));
    });
    svg.replaceChildren(...parts);
  };
  const svg = page.canvas(width, height, `energies of the conformers of ${ligand.id} at each level, kcal/mol`);
  svg.classList.add("levels");
  ligand.onSelect.push(draw);
  draw();
  slot.append(page.figure("Energies, level by level", svg, {
    note: "kcal/mol above the lowest of each level" + (columns.some((c) => c.final) ? "; the final column has the solvation in it" : "") +
      ". Lines that cross are pairs whose order a level changed. Grey: left behind" + (data.others_left_out > 0 ? ` (${data.others_left_out} more are not drawn)` : "") + ".",
  }));
};

// columnsOf is a column for each level that ran, and one for the final energy
// where that differs from the last level's.
function columnsOf(data) {
  const columns = page.run.tiers.map((name, t) => ({ name, of: (c) => c.energies[t] }))
    .filter((column) => data.conformers.some((c) => column.of(c) !== null));
  const last = columns[columns.length - 1];
  const zero = last.of(data.conformers[0]);
  if (data.conformers.some((c) => Math.abs(last.of(c) - zero - c.final) > 0.005)) {
    columns.push({ name: "final", final: true, of: (c) => (c.final === undefined ? null : c.final) });
  }
  return columns;
}

// ceilingOf fits the kept conformers at all levels but the first, whose energies
// may lie far apart.
function ceilingOf(data, columns) {
  let most = 1;
  for (const column of columns.length > 1 ? columns.slice(1) : columns) for (const c of data.conformers) most = Math.max(most, column.of(c) || 0);
  return most * 1.08;
}

function axes(columns, ceiling, x, y, width) {
  const parts = [];
  const step = [0.25, 0.5, 1, 2, 5, 10, 20, 50].find((s) => ceiling / s <= 6) || 100;
  for (let e = 0; e <= ceiling; e += step) {
    parts.push(page.svg("path", { d: `M${left} ${y(e).toFixed(1)}H${width - right}`, class: "grid" }),
      page.text(left - 8, y(e) + 4, String(e), { "text-anchor": "end", class: "tick" }));
  }
  columns.forEach((column, c) => parts.push(page.text(x(c), height - 20 + (width < 480 && c % 2 ? 15 : 0), column.name, { "text-anchor": "middle", class: "axis" })));
  parts.push(page.text(14, (top + height - bottom) / 2, "kcal/mol", { class: "axis", "text-anchor": "middle", transform: `rotate(-90 14 ${(top + height - bottom) / 2})` }));
  return parts;
}
