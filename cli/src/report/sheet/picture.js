// The stress picture on a canvas: bands of equal value, the outline, legend, marks.

const MOST_BANDS = 12;

/** Round levels from low to high, at most twelve bands. */
function levels(low, high) {
  const span = high - low;
  if (!(span > 1e-9 * Math.max(Math.abs(low), Math.abs(high)))) {
    const size = Math.max(Math.abs(low), Math.abs(high)) || 1;
    return { step: size, first: Math.floor(low / size), last: Math.floor(low / size) + 1 };
  }
  let decade = 10 ** Math.floor(Math.log10(span / MOST_BANDS));
  for (;;) {
    for (const round of [1, 2, 2.5, 5]) {
      const step = round * decade;
      const first = Math.floor(low / step + 1e-3);
      const last = Math.ceil(high / step - 1e-3);
      if (last - first <= MOST_BANDS) return { step, first, last };
    }
    decade *= 10;
  }
}

/** A number as readers want it: four digits, no needless zeros. */
function shown(value, digits = 4) {
  if (!Number.isFinite(value)) return "–";
  if (value === 0) return "0";
  const size = Math.abs(value);
  const text =
    size >= 1e6 || size < 1e-4
      ? value.toExponential(digits - 1)
      : value.toPrecision(digits).replace(/(\.\d*?)0+$/, "$1").replace(/\.$/, "");
  return text.replace("-", "−").replace("e+", "e");
}

class Picture {
  constructor(canvas, field, data) {
    this.canvas = canvas;
    this.field = field;
    this.data = data;
    // As fine as a picture can be drawn without a stop.
    const n = Math.max(2, Math.min(8, Math.floor(Math.sqrt(30000 / field.triangles))));
    const fine = lattice(n);
    this.shape = fine.map(([i, j]) => shapes(field.n, field.nodes, i / n, j / n));
    this.cells = latticeCells(n);
    this.fine = fine.length;
    this.places = new Float64Array(2 * this.fine * field.triangles);
    const none = { N: 0, Vx: 0, Vy: 0, Mx: 0, My: 0, T: 0, B: 0 };
    for (let t = 0; t < field.triangles; t += 1) {
      this.shape.forEach((shape, k) => {
        const { at } = field.at(t, shape, none);
        this.places.set(at, 2 * (t * this.fine + k));
      });
    }
    const [x0, x1, y0, y1] = data.box;
    this.box = { x0, x1, y0, y1 };
  }

  /** Fits the canvas to its width and sets the map from the section to it. */
  resize() {
    const { x0, x1, y0, y1 } = this.box;
    const width = this.canvas.clientWidth || 600;
    const margin = 0.09 * width;
    const scale = Math.min((width - 2 * margin) / (x1 - x0), (0.95 * width) / (y1 - y0));
    const height = scale * (y1 - y0) + 2 * margin;
    const ratio = window.devicePixelRatio || 1;
    this.canvas.style.height = `${height}px`;
    this.canvas.width = Math.round(width * ratio);
    this.canvas.height = Math.round(height * ratio);
    this.size = [width, height];
    this.ratio = ratio;
    const left = 0.5 * (width - scale * (x1 - x0));
    this.toCanvas = ([x, y]) => [left + scale * (x - x0), height - margin - scale * (y - y0)];
    this.toSection = ([u, v]) => [x0 + (u - left) / scale, y0 + (height - margin - v) / scale];
  }

  /** Draws the measure under the forces; returns the levels for the legend. */
  draw(key, forces) {
    const { field } = this;
    const measure = MEASURES[key];
    const values = new Float64Array(this.fine * field.triangles);
    let [low, high] = [Infinity, -Infinity];
    for (let t = 0; t < field.triangles; t += 1) {
      for (let k = 0; k < this.fine; k += 1) {
        const s = field.at(t, this.shape[k], forces);
        const value = measure.of(s);
        values[t * this.fine + k] = value;
        if (field.quotable(s.at)) {
          low = Math.min(low, value);
          high = Math.max(high, value);
        }
      }
    }
    if (measure.signed) {
      const most = Math.max(Math.abs(low), Math.abs(high));
      [low, high] = [Math.max(low, -most), Math.min(high, most)];
    } else {
      low = 0;
    }
    const range = levels(low, high);
    const count = Math.max(1, range.last - range.first);
    const paths = Array.from({ length: count }, () => new Path2D());
    for (let t = 0; t < field.triangles; t += 1) {
      for (const [a, b, c] of this.cells) {
        const i = t * this.fine;
        const mean = (values[i + a] + values[i + b] + values[i + c]) / 3;
        const band = Math.min(count - 1, Math.max(0, Math.floor(mean / range.step - range.first)));
        const path = paths[band];
        const corner = [a, b, c].map((k) => {
          const p = 2 * (i + k);
          return this.toCanvas([this.places[p], this.places[p + 1]]);
        });
        path.moveTo(...corner[0]);
        path.lineTo(...corner[1]);
        path.lineTo(...corner[2]);
        path.closePath();
      }
    }
    const g = this.canvas.getContext("2d");
    g.setTransform(this.ratio, 0, 0, this.ratio, 0, 0);
    g.clearRect(0, 0, ...this.size);
    const colours = paths.map((_, k) => this.colour(range, k, measure.signed));
    paths.forEach((path, k) => {
      // Cells overlap by a hair, else the paper shines through between them.
      [g.fillStyle, g.strokeStyle, g.lineWidth] = [colours[k], colours[k], 0.8];
      g.stroke(path);
      g.fill(path);
    });
    this.edges(g);
    return { ...range, colours };
  }

  colour({ step, first, last }, k, signed) {
    const middle = (first + k + 0.5) * step;
    const most = Math.max(Math.abs(first), Math.abs(last)) * step;
    const list = signed ? this.data.colours.signed : this.data.colours.sizes;
    const t = signed ? 0.5 + (0.5 * middle) / most : middle / most;
    return list[Math.round(Math.min(1, Math.max(0, t)) * (list.length - 1))];
  }

  edges(g) {
    const ink = getComputedStyle(this.canvas).getPropertyValue("--ink") || "#222";
    g.strokeStyle = ink;
    g.lineWidth = 1.2;
    g.lineJoin = "round";
    for (const line of this.data.edges) {
      g.beginPath();
      line.forEach((p, k) => (k ? g.lineTo(...this.toCanvas(p)) : g.moveTo(...this.toCanvas(p))));
      g.stroke();
    }
  }
}
