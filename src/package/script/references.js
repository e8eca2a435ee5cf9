// A button beside every heading, check and figure that copies how to refer to it, and leads the address there.

const issue = document.querySelector(".head").dataset.issue;

/** "Figure 7" of a figure; a heading without its footnote marks and buttons. */
function wordsOf(target) {
  if (target.matches("figure")) return target.querySelector("figcaption").textContent.split(".")[0];
  return [...target.childNodes].filter((node) => !node.matches?.("button, sup")).map((node) => node.textContent).join("").trim();
}

async function copy(text) {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return false;
  }
}

for (const target of document.querySelectorAll(".chapter :is(h1, h2, h3)[id], figure[id]")) {
  const words = wordsOf(target);
  const sheet = document.querySelector(`.sheet[data-of="${CSS.escape(target.id)}"]`)?.textContent;
  const reference = `${issue}, ${words}${sheet ? `, sheet ${sheet}` : ""}`;
  const button = make("button", { type: "button", class: "reference", "aria-label": `Copy reference: ${words}` }, "Copy reference");
  button.addEventListener("click", async () => {
    history.replaceState(null, "", `#${target.id}`);
    button.textContent = (await copy(reference)) ? "Copied" : reference;
    setTimeout(() => (button.textContent = "Copy reference"), 2500);
  });
  (target.matches("figure") ? target.querySelector("figcaption") : target).append(" ", button);
}
