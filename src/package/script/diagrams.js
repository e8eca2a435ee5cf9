// Reading a diagram: a position along the member (pointer, touch, or the slider with the keyboard), and a table
// of every drawn effect there with its combination; one combination can be drawn above the envelope.

/** Steps of the slider from one end of a member to the other. */
const STEPS = 200;

/** An effect's name set as a symbol with its subscript. */
function symbolOf(effect) {
  const [letter, index] = effect.split("_");
  return make("span", {}, make("i", {}, letter), ...(index ? [make("sub", {}, index)] : []));
}

class Reading {
  constructor(figure, content) {
    this.svg = figure.querySelector("svg");
    this.member = record.members[content.member];
    this.states = (this.member.states ?? record.states)[content.purpose];
    this.content = content;
    this.marks = draw(this.svg, "g", { class: "reading", "aria-hidden": "true" });
    this.controls(figure);
    this.pointing();
  }

  controls(figure) {
    const { member, purpose } = this.content;
    const { factor, label } = record.units.x;
    const length = this.member.length / factor;
    const name = `along ${member}`;
    this.slider = make("input", { type: "range", min: 0, max: STEPS, value: STEPS / 2, "aria-label": `Position ${name}` });
    this.field = make("input", { type: "number", min: 0, max: Number(length.toPrecision(9)), step: "any", "aria-label": `Position ${name} in ${label}` });
    this.choice = make("select", { "aria-label": `Combination of ${name}` }, make("option", { value: "" }, `Envelope, ${purpose}`));
    this.states.forEach((state, index) => this.choice.append(make("option", { value: index }, `${state.number}: ${state.title}`)));
    this.table = make("table", { "aria-label": `Effects at the position ${name}`, "aria-live": "polite" });
    const output = make("div", { class: "table" }, this.table);
    this.slider.addEventListener("input", () => this.at((Number(this.slider.value) / STEPS) * this.member.length));
    this.field.addEventListener("input", () => {
      const x = Number(this.field.value) * factor;
      if (this.field.value !== "" && x >= 0 && x <= this.member.length * (1 + 1e-9)) this.at(Math.min(x, this.member.length), this.field);
    });
    this.choice.addEventListener("change", () => {
      this.line();
      this.at(this.x ?? this.member.length / 2);
    });
    const position = make("label", {}, "x = ", this.field, ` ${label}`);
    const controls = make("div", { class: "read" }, this.choice, position, this.slider);
    figure.querySelector("figcaption").after(controls, output);
  }

  pointing() {
    const move = (event) => {
      const point = new DOMPoint(event.clientX, event.clientY).matrixTransform(this.svg.getScreenCTM().inverse());
      const [left, right] = this.content.ends;
      const share = Math.min(1, Math.max(0, (point.x - left) / (right - left)));
      this.at(this.snapped(share * this.member.length));
    };
    this.svg.addEventListener("pointermove", (event) => event.pointerType === "mouse" && move(event));
    this.svg.addEventListener("pointerdown", move);
  }

  /** The position itself, or the break of the member beside it. */
  snapped(x) {
    return breaksOf(this.member).find((at) => Math.abs(at - x) < this.member.length / STEPS) ?? x;
  }

  paper(x) {
    const [left, right] = this.content.ends;
    return left + (x / this.member.length) * (right - left);
  }

  chosen() {
    return this.choice.value === "" ? this.states : [this.states[Number(this.choice.value)]];
  }

  /** Reads everything at x; both sides of a jump where there is one. */
  at(x, source) {
    this.x = x;
    const { factor } = record.units.x;
    this.slider.value = (x / this.member.length) * STEPS;
    this.slider.setAttribute("aria-valuetext", `x = ${inUnit("x", x)} ${record.units.x.label}`);
    if (source !== this.field) this.field.value = Number((x / factor).toPrecision(6));
    this.marks.querySelectorAll(".cursor").forEach((mark) => mark.remove());
    const rows = this.content.rows;
    draw(this.marks, "path", { class: "cursor", d: `M${this.paper(x)} ${rows[0].axis - 12}V${rows.at(-1).axis + 12}` });
    const head = make("tr");
    for (const title of ["Effect", "Greatest", "in", "Least", "in"]) head.append(make("th", { scope: "col" }, title));
    const body = make("tbody");
    for (const { effect, axis, scale } of rows) {
      const sides = ["before", "after"].map((side) => rangeOver(this.chosen(), this.member, effect, x, side));
      const jump = ["least", "greatest"].some((end) => inUnit(effect, sides[0][end].value) !== inUnit(effect, sides[1][end].value));
      const row = make("tr", { "data-effect": effect });
      row.append(make("th", { scope: "row" }, symbolOf(effect), ` in ${record.units[effect].label}`));
      for (const end of ["greatest", "least"]) {
        const found = jump ? sides.map((side) => side[end]) : [sides[0][end]];
        row.append(make("td", { class: "right" }, found.map(({ value }) => inUnit(effect, value)).join(" | ")));
        row.append(make("td", {}, [...new Set(found.map(inShort))].join(" | ")));
        for (const { value } of found) draw(this.marks, "circle", { class: "cursor", cx: this.paper(x), cy: axis + value * scale, r: 0.9 });
      }
      body.append(row);
    }
    this.table.replaceChildren(make("thead", {}, head), body);
  }

  /** Draws the chosen combination along the member. */
  line() {
    this.marks.querySelectorAll(".chosen").forEach((mark) => mark.remove());
    if (this.choice.value === "") return;
    for (const { effect, axis, scale } of this.content.rows) {
      for (const end of ["least", "greatest"]) {
        const points = this.member.pieces.flatMap((piece) =>
          Array.from({ length: 33 }, (_, i) => {
            const x = piece.from + ((piece.to - piece.from) * i) / 32;
            const side = i === 0 ? "after" : "before";
            return `${this.paper(x).toFixed(2)} ${(axis + rangeOver(this.chosen(), this.member, effect, x, side)[end].value * scale).toFixed(2)}`;
          }),
        );
        draw(this.marks, "path", { class: "chosen", d: `M${points.join("L")}` });
      }
    }
  }
}

for (const [id, content] of Object.entries(record?.figures ?? {})) {
  const figure = document.getElementById(`figure-${id}`);
  if (figure) new Reading(figure, content);
}
