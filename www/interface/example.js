// An example of a page's own script: it shows what `aftercount.outcome` makes of the text in the box.
(async function () {
  "use strict";
  const at = (id) => document.getElementById(id);

  function show(answer) {
    at("sentence").textContent = answer.ok ? answer.sentence : "This text cannot be worked out:";
    at("marking").textContent = (answer.ok && answer.marking) || "";
    at("caution").textContent = answer.ok ? answer.caution : "";
    at("figures").hidden = !answer.ok;
    at("problems").replaceChildren(...(answer.problems || []).map((problem) => {
      const line = document.createElement("li");
      // Text, never markup: a name may hold anything.
      line.textContent = (problem.key ? problem.key + ": " : "") + problem.problem;
      return line;
    }));
    for (const side of answer.ok ? ["x", "y"] : []) {
      const cells = at(side).querySelectorAll("td");
      const { start, losses, end } = answer[side];
      [start, losses.all, end].forEach((figure, place) => {
        cells[place].textContent = figure === null ? "without bound" : figure.toFixed(1);
      });
    }
  }

  const work = () => show(aftercount.outcome(at("text").value));
  await aftercount.ready;
  at("work").addEventListener("click", work);
  work();
})();
