// Long tables get a search box, and a choice of what the first column names; tables and formulas that are wider
// than the page can be scrolled with the keyboard.

/** Tables with fewer rows need no filter. */
const FILTERED = 10;

function filter(wrapper) {
  const table = wrapper.querySelector("table");
  const rows = [...table.tBodies[0].rows];
  const caption = table.caption?.textContent ?? "the table";
  const search = make("input", { type: "search", placeholder: "Filter rows", "aria-label": `Filter the rows of ${caption}` });
  const count = make("output", {});
  const key = (row) => row.cells[0].textContent.trim();
  const keys = [...new Set(rows.map(key))].filter((text) => text !== "");
  const choice = make("select", { "aria-label": `${table.tHead.rows[0].cells[0].textContent}: rows of ${caption}` }, make("option", { value: "" }, "All"));
  for (const text of keys) choice.append(make("option", { value: text }, text));
  const apply = () => {
    const words = search.value.toLowerCase().split(/\s+/);
    let shown = 0;
    for (const row of rows) {
      const text = row.textContent.toLowerCase();
      row.hidden = !(words.every((word) => text.includes(word)) && (choice.value === "" || key(row) === choice.value));
      shown += row.hidden ? 0 : 1;
    }
    count.textContent = shown < rows.length ? `${shown} of ${rows.length} rows` : "";
  };
  search.addEventListener("input", apply);
  choice.addEventListener("change", apply);
  const controls = make("div", { class: "filter" }, search);
  if (keys.length > 1 && keys.length < rows.length) controls.append(choice);
  controls.append(count);
  wrapper.before(controls);
}

for (const wrapper of document.querySelectorAll(".chapter .table")) {
  if (wrapper.querySelector("tbody")?.rows.length >= FILTERED) filter(wrapper);
}

function reachable() {
  for (const wide of document.querySelectorAll(".table, .display, figure, pre")) {
    if (wide.scrollWidth > wide.clientWidth) wide.tabIndex = 0;
    else wide.removeAttribute("tabindex");
  }
}
addEventListener("resize", reachable);
reachable();
