// An example of a page's own script: it shows what `aftercount.outcome` makes of the text in the box.
(async function () {
  "use strict";
  const at = (id) => document.getElementById(id);

  // Text, never markup: a name may hold anything. What stands between grave accents is code.
  function line({ key, found, problem }) {
    const item = document.createElement("li");
    const parts = [key, found].filter((part) => part).map((part) => "`" + part.replaceAll("`", "'") + "`");
    parts.concat(problem).join(": ").split("`").forEach((part, place) => {
      const piece = document.createElement(place % 2 ? "code" : "span");
      piece.textContent = part;
      item.append(piece);
    });
    return item;
  }

  const shown = (figure) => (Number.isFinite(figure) ? figure.toFixed(1) : "without bound");

  function show(answer) {
    at("sentence").textContent = answer.ok ? answer.sentence : "This text cannot be worked out:";
    at("marking").textContent = (answer.ok && answer.marking) || "";
    at("mark").textContent = answer.ok ? "Text mark " + answer.text_mark : "";
    at("caution").textContent = answer.ok ? answer.caution : "";
    at("problems").replaceChildren(...(answer.problems || []).map(line));
    // Where a number in question has no value now, there is an answer to it and no figures.
    at("figures").hidden = !answer.x;
    for (const side of ["x", "y"]) {
      const left = answer[side];
      const figures = left ? [left.start, left.joined, left.withdrawn, left.losses.all, left.end].map(shown) : [];
      at(side).querySelectorAll("td").forEach((cell, place) => { cell.textContent = figures[place] || ""; });
    }
  }

  const work = () => show(aftercount.outcome(at("text").value));
  await aftercount.ready;
  at("work").addEventListener("click", work);
  work();
})();
