"use strict";
(() => {
  const data = JSON.parse(document.getElementById("numbers").textContent);
  const choice = document.getElementById("units");
  const raised = (power) => [...String(power)].map((sign) => "⁰¹²³⁴⁵⁶⁷⁸⁹"["0123456789".indexOf(sign)] ?? "⁻").join("");

  /** Write a number as the page's other numbers: so many digits, a true minus sign. */
  function numberText(value, digits = 6) {
    if (!Number.isFinite(value)) return "none";
    const [mantissa, power] = value.toPrecision(digits).split("e");
    const short = power === undefined && Math.abs(value) < 1e-4 && value !== 0 ? value.toExponential(digits - 1) : null;
    const [figures, tens] = short ? short.split("e") : [mantissa, power];
    const plain = figures.includes(".") ? figures.replace(/\.?0+$/, "") : figures;
    return (plain + (tens === undefined ? "" : "×10" + raised(Number(tens)))).replace("-", "−");
  }

  const system = () => data.systems[Number(choice.value)];
  const inUnits = (value, powers, digits) => numberText(value * system().factors[powers], digits) + " " + system().units[powers];

  function unpack(text) {
    if (text === undefined) return undefined;
    return new Float64Array(Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0)).buffer);
  }

  const columns = new Map();
  function columnsOf(number) {
    if (!columns.has(number)) {
      const packed = data.drawings[number];
      const names = ["separation", "energy", "force", "otherEnergy", "otherForce"];
      columns.set(number, Object.fromEntries(names.map((name) => [name, unpack(packed[name])])));
    }
    return columns.get(number);
  }

  function nearest(ascending, wanted) {
    let low = 0;
    let high = ascending.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (ascending[middle] <= wanted) low = middle; else high = middle;
    }
    return wanted - ascending[low] <= ascending[high] - wanted ? low : high;
  }

  const meaning = (force) => force > 0 ? " (repulsion)" : force < 0 ? " (attraction)" : " (no force)";

  /** Say what a drawing shows at one of its rows. */
  function said(number, row) {
    const found = columnsOf(number);
    const parts = [["separation", inUnits(found.separation[row], "0,1")]];
    if (found.energy) parts.push(["energy", inUnits(found.energy[row], "1,0")]);
    if (found.force) parts.push(["force", inUnits(found.force[row], "1,-1") + meaning(found.force[row])]);
    if (found.otherEnergy) parts.push(["other energy", inUnits(found.otherEnergy[row], "1,0")]);
    if (found.otherForce) parts.push(["other force", inUnits(found.otherForce[row], "1,-1")]);
    return parts;
  }

  function valueIn(kind, found, row) {
    switch (kind) {
      case "energy": return found.energy[row];
      case "force": return found.force[row];
      case "energy-difference": return found.otherEnergy[row] - found.energy[row];
      case "force-difference": return found.otherForce[row] - found.force[row];
      default: return NaN;
    }
  }

  function show(figure, row) {
    const number = Number(figure.dataset.drawing);
    const found = columnsOf(number);
    const [low, high] = data.drawings[number].limits;
    const across = 100 * (found.separation[row] - low) / (high - low);
    const cursor = figure.querySelector(".cursor");
    cursor.style.left = `calc(var(--gutter) + (100% - var(--gutter)) * ${across / 100})`;
    cursor.hidden = false;
    for (const plot of figure.querySelectorAll(".plot")) {
      const [base, top] = plot.dataset.limits.split(",").map(Number);
      const down = 100 * (top - valueIn(plot.dataset.panel, found, row)) / (top - base);
      const dot = plot.querySelector(".dot");
      dot.hidden = !(down >= -0.5 && down <= 100.5);
      dot.style.left = across + "%";
      dot.style.top = down + "%";
    }
    const parts = said(number, row);
    const output = figure.querySelector("output");
    output.replaceChildren(...parts.flatMap(([name, text], place) => {
      const bold = document.createElement("b");
      bold.textContent = text;
      return [(place ? ", " : "") + name + " ", bold];
    }));
    figure.querySelector("input").setAttribute("aria-valuetext", parts.map((part) => part.join(" ")).join(", "));
  }

  function prepare(figure) {
    const number = Number(figure.dataset.drawing);
    const slider = figure.querySelector("input");
    const separation = columnsOf(number).separation;
    slider.max = separation.length - 1;
    slider.disabled = false;
    for (const event of ["input", "focus"]) slider.addEventListener(event, () => show(figure, Number(slider.value)));
    const stack = figure.querySelector(".stack");
    stack.addEventListener("pointermove", (event) => {
      const box = figure.querySelector(".plot").getBoundingClientRect();
      const [low, high] = data.drawings[number].limits;
      const wanted = low + (high - low) * (event.clientX - box.left) / box.width;
      slider.value = nearest(separation, Math.min(Math.max(wanted, low), high));
      show(figure, Number(slider.value));
    });
  }

  function changeUnits() {
    document.documentElement.dataset.units = choice.value;
    for (const shown of document.querySelectorAll("data.quantity")) {
      shown.textContent = inUnits(Number(shown.value), shown.dataset.powers, Number(shown.dataset.digits ?? 6));
    }
    for (const unit of document.querySelectorAll(".unit")) unit.textContent = system().units[unit.dataset.powers];
    for (const figure of document.querySelectorAll("figure.curves")) {
      if (!figure.querySelector(".cursor").hidden) show(figure, Number(figure.querySelector("input").value));
    }
  }

  // A figure is prepared when it comes near, so that a page of many opens at once.
  const watcher = new IntersectionObserver((entries) => {
    for (const entry of entries) {
      if (entry.isIntersecting) {
        watcher.unobserve(entry.target);
        prepare(entry.target);
      }
    }
  }, { rootMargin: "100%" });
  for (const figure of document.querySelectorAll("figure.curves")) watcher.observe(figure);
  choice.addEventListener("change", changeUnits);
})();
