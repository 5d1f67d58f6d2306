// The overview can be sorted and filtered.

page.overview = () => {
  const body = document.querySelector("#ligands tbody");
  const rows = [...body.rows];
  const filter = document.querySelector("#filter");
  const wanted = document.querySelector("#filter-text"), status = document.querySelector("#filter-status"), warned = document.querySelector("#filter-warned");
  const count = document.querySelector("#filter-count");

  const narrow = () => {
    const text = wanted.value.trim().toLowerCase();
    let shown = 0;
    for (const tr of rows) {
      const fits = (!text || tr.dataset.text.includes(text)) && (!status.value || tr.dataset.status === status.value) &&
        (!warned.checked || Number(tr.dataset.warnings) > 0);
      tr.hidden = !fits;
      if (fits) shown++;
    }
    count.textContent = shown === rows.length ? `${rows.length} shown` : `${shown} of ${rows.length} shown`;
  };
  for (const tr of rows) tr.dataset.text = tr.textContent.toLowerCase();
  filter.addEventListener("submit", (e) => e.preventDefault());
  filter.addEventListener("input", narrow);

  for (const th of document.querySelectorAll("#ligands th[data-sort]")) {
    const button = page.element("button", { type: "button", click: () => sort(th) }, th.textContent);
    th.replaceChildren(button);
  }
  // sort turns a column round; numbers start with the largest, words with the
  // first. Equal rows keep the order of the run.
  function sort(th) {
    const key = th.dataset.sort, numeric = key !== "status";
    const before = th.getAttribute("aria-sort");
    const up = before ? before === "descending" : !numeric || key === "order";
    for (const other of document.querySelectorAll("#ligands th[data-sort]")) other.removeAttribute("aria-sort");
    th.setAttribute("aria-sort", up ? "ascending" : "descending");
    rows.sort((a, b) => {
      const [p, q] = [a.dataset[key], b.dataset[key]];
      const by = numeric ? Number(p) - Number(q) : p.localeCompare(q, "en");
      return (up ? by : -by) || Number(a.dataset.order) - Number(b.dataset.order);
    });
    body.append(...rows);
  }
  body.addEventListener("click", (e) => {
    const tr = e.target.closest("tr");
    if (tr && !e.target.closest("a") && !getSelection().toString()) location.hash = `ligand-${tr.dataset.n}`;
  });
  page.visible = () => rows.filter((tr) => !tr.hidden).map((tr) => Number(tr.dataset.n));
  narrow();
};
