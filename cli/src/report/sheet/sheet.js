// The sheet: number fields and sliders for the section forces, and everything that follows from them.

(() => {
  const source = document.getElementById("sheet-data");
  if (!source) return;
  const data = JSON.parse(source.textContent);
  const field = new Field(data);
  const by = (id) => document.getElementById(id);
  const fine = new Fine(field);
  const picture = new Picture(by("picture"), field, fine, data);
  const forces = Object.fromEntries(FORCES.map((name) => [name, 0]));
  let measure = "von_mises";
  let probe = null;
  let pending = false;

  const unitOf = {
    N: data.units.force,
    Vx: data.units.force,
    Vy: data.units.force,
    Mx: data.units.moment,
    My: data.units.moment,
    T: data.units.moment,
    B: `${data.units.moment}·${data.units.length}`,
  };
  const title = {
    N: "axial force N",
    Vx: "shear force Vx",
    Vy: "shear force Vy",
    Mx: "moment Mx",
    My: "moment My",
    T: "torque T about the shear centre",
    B: "bimoment B",
  };

  // How far a slider goes: to twice the largest action, or to where the force alone stresses the section
  // to its yield (100 MPa without one).
  const one = (name) => ({ N: 0, Vx: 0, Vy: 0, Mx: 0, My: 0, T: 0, B: 0, [name]: 1 });
  const round = (x) => {
    const decade = 10 ** Math.floor(Math.log10(x));
    return [1, 2, 5, 10].find((r) => r * decade >= x * (1 - 1e-9)) * decade;
  };
  const reach = (name) => {
    const largest = Math.max(0, ...data.actions.map((a) => Math.abs(a.forces[name])));
    if (largest > 0) return round(2 * largest);
    const stress = extremes(field, fine, one(name)).find((e) => e.key === "von_mises").value;
    return stress > 0 ? round(data.reference_stress / stress) : 1;
  };

  const rows = by("forces");
  const inputs = {};
  for (const name of FORCES) {
    const limit = reach(name);
    const row = document.createElement("div");
    row.className = "force";
    row.innerHTML = `
      <label for="number-${name}">${name}</label>
      <input id="number-${name}" type="number" step="any" value="0" aria-label="${title[name]}, ${unitOf[name]}">
      <span class="unit">${unitOf[name]}</span>
      <input id="slide-${name}" type="range" min="${-limit}" max="${limit}" step="${limit / 200}" value="0"
             aria-label="${title[name]}, slider">`;
    rows.append(row);
    const [number, slide] = [row.querySelector("[type=number]"), row.querySelector("[type=range]")];
    number.addEventListener("input", () => set(name, Number(number.value), number));
    slide.addEventListener("input", () => set(name, Number(slide.value), slide));
    inputs[name] = { number, slide };
  }

  function set(name, value, from) {
    forces[name] = Number.isFinite(value) ? value : 0;
    const { number, slide } = inputs[name];
    if (from !== number) number.value = String(Number(forces[name].toPrecision(6)));
    if (from !== slide) slide.value = String(forces[name]);
    refresh();
  }

  const line = new LineOfAction(by("over"), picture, data.centre, () => {
    by("at-x").value = String(Number(line.at[0].toPrecision(6)));
    by("at-y").value = String(Number(line.at[1].toPrecision(6)));
    refresh();
  });
  for (const [id, k] of [["at-x", 0], ["at-y", 1]]) {
    by(id).value = String(Number(data.centre[k].toPrecision(6)));
    by(id).addEventListener("input", () => {
      line.at[k] = Number(by(id).value) || 0;
      refresh();
    });
  }
  by("to-centre").addEventListener("click", () => line.set(data.centre));

  const choice = by("measure");
  for (const [key, { name }] of Object.entries(MEASURES)) choice.add(new Option(name, key));
  choice.addEventListener("change", () => {
    measure = choice.value;
    refresh();
  });

  const actions = by("action");
  data.actions.forEach((action, k) => actions.add(new Option(action.name, String(k))));
  actions.addEventListener("change", () => apply(data.actions[Number(actions.value)]));
  by("clear").addEventListener("click", () => apply({ forces: one("none"), at: null }));

  function apply(action) {
    if (!action) return;
    for (const name of FORCES) {
      forces[name] = action.forces[name] || 0;
      inputs[name].number.value = String(Number(forces[name].toPrecision(9)));
      inputs[name].slide.value = String(forces[name]);
    }
    line.set(action.at || data.centre);
  }

  /** Section forces with the torque of the line of action. */
  function total() {
    const [ex, ey] = [line.at[0] - data.centre[0], line.at[1] - data.centre[1]];
    const offset = (ex * forces.Vy - ey * forces.Vx) * data.moment_per_force_length;
    return { offset, all: { ...forces, T: forces.T + offset } };
  }

  function refresh() {
    if (pending) return;
    pending = true;
    requestAnimationFrame(() => {
      pending = false;
      show();
    });
  }

  function show() {
    const { offset, all } = total();
    const found = extremes(field, fine, all);
    const range = picture.draw(measure);
    line.draw(forces.Vx, forces.Vy);
    const { moment, stress } = data.units;
    by("offset").textContent = shown(offset);
    by("torque").textContent = shown(all.T);
    document.querySelectorAll(".moment-unit").forEach((node) => (node.textContent = moment));
    by("extremes").replaceChildren(
      ...found.map((e) => {
        const value = e.use ? shown(e.value) : `${shown(e.value)} ${stress}`;
        const line = row(e.key, e.label, value, `(${shown(e.at[0])}, ${shown(e.at[1])})`, e.piece);
            return line;
      }),
    );
    by("largest").textContent = `${shown(found.find((e) => e.key === "von_mises").value)} ${stress}`;
    const use = found.find((e) => e.use);
    by("factor").textContent = use ? (use.value > 0 ? shown(1 / use.value) : "no stress") : "no yield stress stated";
    legend(range, stress);
    if (probe) read(probe, all);
    document.dispatchEvent(new CustomEvent("sheet", { detail: { forces, at: line.at, measure } }));
  }

  function legend({ step, first, colours }, unit) {
    by("legend").replaceChildren(
      ...colours.map((colour, k) => {
        const item = document.createElement("li");
        const box = document.createElement("span");
        box.style.background = colour;
        const low = (first + k) * step;
        item.append(box, `${shown(low)} to ${shown(low + step)}`);
        return item;
      }),
    );
    by("legend-unit").textContent = `${MEASURES[measure].name}, ${unit}`;
  }

  /** A row of a table: its heading, a number, and texts. */
  function row(key, heading, value, ...texts) {
    const line = document.createElement("tr");
    line.dataset.key = key;
    const head = document.createElement("th");
    head.scope = "row";
    head.textContent = heading;
    line.append(head);
    for (const [k, text] of [value, ...texts].entries()) {
      const cell = document.createElement("td");
      if (k === 0) cell.className = "number";
      cell.textContent = text;
      line.append(cell);
    }
    return line;
  }

  function read(point, all) {
    const found = field.locate(point);
    const piece = found ? field.pieces[field.piece[found.t]] : "no material";
    by("place").textContent = `Stress at (${point.join(", ")}) ${data.units.length}, ${piece}`.replaceAll("-", "−");
    by("place").dataset.piece = found ? piece : "";
    if (!found) {
      by("reading").replaceChildren();
      return;
    }
    const s = field.at(found.t, shapes(field.n, field.nodes, found.xi, found.eta), all);
    by("reading").replaceChildren(
      ...Object.entries(MEASURES).map(([key, m]) => {
        // What the page's numbers cannot tell from nothing is nothing.
        const value = Math.abs(m.of(s)) < 1e-6 * MEASURES.tresca.of(s) ? 0 : m.of(s);
        return row(key, m.name, `${shown(value)} ${data.units.stress}`);
      }),
    );
  }

  const stage = by("stage");
  stage.addEventListener("pointermove", (event) => {
    const frame = picture.canvas.getBoundingClientRect();
    // To as many decimals as a tenth of a pixel has: the place that is named is the place that is read.
    const decimals = Math.max(0, Math.ceil(1 - Math.log10(picture.pixel)));
    probe = picture
      .toSection([event.clientX - frame.left, event.clientY - frame.top])
      .map((c) => Number(c.toFixed(decimals)));
    [by("probe-x").value, by("probe-y").value] = probe;
    read(probe, total().all);
  });
  for (const id of ["probe-x", "probe-y"]) {
    by(id).addEventListener("input", () => {
      probe = ["probe-x", "probe-y"].map((field) => Number(by(field).value) || 0);
      read(probe, total().all);
    });
  }

  const fit = () => {
    picture.resize();
    refresh();
  };
  window.addEventListener("resize", fit);
  window.matchMedia("(prefers-color-scheme: dark)").addEventListener("change", refresh);
  fit();
  const kept = JSON.parse(sessionStorage.getItem("sheet") || "null");
  if (kept) {
    measure = choice.value = kept.measure;
    apply(kept);
  } else if (data.actions.length) apply(data.actions[0]);
  else set("Vy", Number(inputs.Vy.slide.max) / 2);
  by("coarse").hidden = !data.coarse;
  by("sheet").dataset.ready = "yes";
})();
