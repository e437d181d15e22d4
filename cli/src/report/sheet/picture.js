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
  constructor(canvas, field, fine, data) {
    this.canvas = canvas;
    this.field = field;
    this.fine = fine;
    this.data = data;
    this.cells = latticeCells(SEARCHED);
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
    this.pixel = 1 / scale;
    const left = 0.5 * (width - scale * (x1 - x0));
    this.toCanvas = ([x, y]) => [left + scale * (x - x0), height - margin - scale * (y - y0)];
    this.toSection = ([u, v]) => [x0 + (u - left) / scale, y0 + (height - margin - v) / scale];
    this.cover();
  }

  /** Finds for each pixel the cell that its middle is in, and how near it is to the cell's first two corners. */
  cover() {
    const { fine, ratio } = this;
    const [w, h] = [this.canvas.width, this.canvas.height];
    this.owner = new Int32Array(w * h).fill(-1);
    this.weights = new Float32Array(2 * w * h);
    this.image = new ImageData(w, h);
    const places = new Float64Array(fine.places.length);
    for (let k = 0; k < places.length; k += 2) {
      const [u, v] = this.toCanvas([fine.places[k], fine.places[k + 1]]);
      places[k] = ratio * u - 0.5;
      places[k + 1] = ratio * v - 0.5;
    }
    const count = this.cells.length;
    for (let t = 0; t < this.field.triangles; t += 1) {
      for (let c = 0; c < count; c += 1) {
        const [p, q, r] = this.cells[c];
        const first = t * fine.per;
        const [xp, yp] = [places[2 * (first + p)], places[2 * (first + p) + 1]];
        const [xq, yq] = [places[2 * (first + q)], places[2 * (first + q) + 1]];
        const [xr, yr] = [places[2 * (first + r)], places[2 * (first + r) + 1]];
        const det = (xp - xr) * (yq - yr) - (xq - xr) * (yp - yr);
        if (det === 0) continue;
        const [low, high] = [Math.max(0, Math.ceil(Math.min(yp, yq, yr))), Math.min(h - 1, Math.max(yp, yq, yr))];
        const [left, right] = [Math.max(0, Math.ceil(Math.min(xp, xq, xr))), Math.min(w - 1, Math.max(xp, xq, xr))];
        for (let y = low; y <= high; y += 1) {
          for (let x = left; x <= right; x += 1) {
            const a = ((x - xr) * (yq - yr) - (xq - xr) * (y - yr)) / det;
            const b = ((xp - xr) * (y - yr) - (x - xr) * (yp - yr)) / det;
            // A hair of overlap, that no pixel is left out between two cells.
            if (a < -1e-6 || b < -1e-6 || a + b > 1 + 1e-6) continue;
            const pixel = y * w + x;
            this.owner[pixel] = t * count + c;
            this.weights[2 * pixel] = a;
            this.weights[2 * pixel + 1] = b;
          }
        }
      }
    }
  }

  /** Draws the measure under the forces last superposed; returns the levels for the legend. */
  draw(key) {
    const { fine } = this;
    const measure = MEASURES[key];
    const values = new Float64Array(fine.quotable.length);
    let [low, high] = [Infinity, -Infinity];
    const s = {};
    for (let point = 0; point < values.length; point += 1) {
      const value = measure.of(fine.at(point, s));
      values[point] = value;
      if (fine.quotable[point]) {
        low = Math.min(low, value);
        high = Math.max(high, value);
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
    const colours = Array.from({ length: count }, (_, k) => this.colour(range, k, measure.signed));
    const inks = colours.map((hex) => {
      const [r, g, b] = [1, 3, 5].map((at) => parseInt(hex.slice(at, at + 2), 16));
      return (255 << 24) | (b << 16) | (g << 8) | r;
    });
    const pixels = new Uint32Array(this.image.data.buffer);
    const { owner, weights, cells } = this;
    for (let pixel = 0; pixel < owner.length; pixel += 1) {
      if (owner[pixel] < 0) continue;
      const cell = cells[owner[pixel] % cells.length];
      const first = Math.floor(owner[pixel] / cells.length) * fine.per;
      const [a, b] = [weights[2 * pixel], weights[2 * pixel + 1]];
      const value = a * values[first + cell[0]] + b * values[first + cell[1]] + (1 - a - b) * values[first + cell[2]];
      pixels[pixel] = inks[Math.min(count - 1, Math.max(0, Math.floor(value / range.step - range.first)))];
    }
    const g = this.canvas.getContext("2d");
    g.putImageData(this.image, 0, 0);
    g.setTransform(this.ratio, 0, 0, this.ratio, 0, 0);
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
