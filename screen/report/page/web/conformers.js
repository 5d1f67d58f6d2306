// The table of conformers chooses what the figures show.

page.conformers = (article, ligand) => {
  const rows = [...article.querySelectorAll("table.rows tbody tr")];
  rows.forEach((tr, k) => {
    const cell = tr.querySelector("th");
    const button = page.element("button", { type: "button", click: () => ligand.select(k), "aria-pressed": "false", "aria-label": `show conformer ${cell.textContent}` }, cell.textContent);
    cell.replaceChildren(button);
    tr.addEventListener("click", (e) => { if (e.target !== button) ligand.select(k); });
    tr.addEventListener("keydown", (e) => {
      const by = { ArrowDown: 1, ArrowUp: -1 }[e.key];
      if (!by || !rows[k + by]) return;
      e.preventDefault();
      rows[k + by].querySelector("button").focus();
      ligand.select(k + by);
    });
  });
  const draw = () => rows.forEach((tr, k) => {
    tr.classList.toggle("chosen", k === ligand.selected);
    tr.querySelector("button").setAttribute("aria-pressed", String(k === ligand.selected));
  });
  ligand.onSelect.push(draw);
  draw();
};

// structure shows the drawing of the overview in full size.
page.structure = (slot, ligand) => {
  const drawing = document.querySelector(`#ligands tr[data-n="${ligand.n}"] svg.structure`);
  if (!drawing) return;
  const copy = drawing.cloneNode(true);
  ligand.whenDrawn.push((marked) => {
    for (const spot of copy.querySelectorAll(".spots circle")) spot.classList.toggle("marked", marked.includes(Number(spot.dataset.a)));
  });
  slot.append(page.figure("Structure", copy));
};
