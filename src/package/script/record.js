// Effects along members, from the exact polynomials of the Record: one for each piece of a member, effect and
// load case, in s = x − from, lowest power first, in SI. A combination is its factors on load cases; where spans
// are loaded or not, the parts in `free` act if they add to what is looked for.

const record = JSON.parse(document.getElementById("page.record")?.textContent ?? "null");

/** The piece of a member on one side of position x. */
function pieceAt(member, x, side) {
  if (side === "before") return member.pieces.find((piece) => x <= piece.to) ?? member.pieces.at(-1);
  return member.pieces.findLast((piece) => piece.from <= x) ?? member.pieces[0];
}

/** The positions where an effect may jump. */
function breaksOf(member) {
  return member.pieces.flatMap((piece) => [piece.from, piece.to]);
}

/** The least and greatest value of an effect in a combination, with the parts that act in each. */
function rangeIn(state, member, effect, x, side) {
  const piece = pieceAt(member, x, side);
  const s = x - piece.from;
  const ofCase = (index) => (piece.fields[effect]?.[index] ?? []).reduceRight((sum, c) => sum * s + c, 0);
  let least, greatest;
  for (const { terms, free } of state.acting) {
    const own = terms.reduce((sum, [index, factor]) => sum + factor * ofCase(index), 0);
    const parts = free.map(([index, factor]) => [index, factor * ofCase(index)]);
    const end = (adds) => {
      const acting = parts.filter(([, value]) => adds(value));
      return { value: acting.reduce((sum, [, value]) => sum + value, own), state, parts: [...terms, ...acting].map(([index]) => index) };
    };
    const [low, high] = [end((value) => value < 0), end((value) => value > 0)];
    if (!least || low.value < least.value) least = low;
    if (!greatest || high.value > greatest.value) greatest = high;
  }
  return { least, greatest };
}

/** The least and greatest value over several combinations. */
function rangeOver(states, member, effect, x, side) {
  let least, greatest;
  for (const state of states) {
    const range = rangeIn(state, member, effect, x, side);
    if (!least || range.least.value < least.value) least = range.least;
    if (!greatest || range.greatest.value > greatest.value) greatest = range.greatest;
  }
  return { least, greatest };
}

/** The number of a combination with the spans that are loaded in it, as the tables write it. */
function inShort({ state, parts }) {
  const indices = state.acting.flatMap(({ terms, free }) => [...terms, ...free]).map(([index]) => index);
  const choices = Object.entries(record.parts)
    .filter(([, own]) => own.some((index) => indices.includes(index)))
    .map(([name, own]) => {
      const acting = own.filter((index) => parts.includes(index)).map((index) => record.cases[index].slice(name.length + 1));
      return acting.length > 0 ? `${name} on ${acting.join(", ")}` : `no ${name}`;
    });
  return choices.length > 0 ? `${state.number} [${choices.join("; ")}]` : state.number;
}

/** A value in the unit of its effect; `x` for positions. */
function inUnit(effect, value) {
  return printed(value / record.units[effect].factor, record.significant);
}
