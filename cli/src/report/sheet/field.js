// Unit stress fields at the nodes of every triangle, and their superposition.
//
// Each node carries twelve numbers: normal stress of unit N, Mx, My, B, then the two shear stresses of
// unit Vx, Vy, T and Tw, in the declared units. Inside a triangle they are polynomials through its nodes: as
// good between nodes as on them where the page carries as many nodes as the elements have; it says if not.

const FORCES = ["N", "Vx", "Vy", "Mx", "My", "T", "B"];
const COMPONENTS = 12;

/** Base64 to an array of floats: 32 bits each, little-endian as every browser's machine is, or the upper 24. */
function floats(text, width = 4) {
  const raw = atob(text);
  const bytes = new Uint8Array((raw.length / width) * 4);
  for (let i = 0; i < raw.length; i += 1) {
    const k = i % width;
    bytes[4 * ((i - k) / width) + k + 4 - width] = raw.charCodeAt(i);
  }
  return new Float32Array(bytes.buffer);
}

/** Barycentric numbers (i, j) of a lattice's points: row by row, i to vertex 1, j to vertex 2. */
function lattice(n) {
  const points = [];
  for (let i = 0; i <= n; i += 1) for (let j = 0; j <= n - i; j += 1) points.push([i, j, n - i - j]);
  return points;
}

/** The small triangles of a lattice, as indices into its points. */
function latticeCells(n) {
  const index = (i, j) => i * (n + 1) - (i * (i - 1)) / 2 + j;
  const cells = [];
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n - i; j += 1) {
      cells.push([index(i, j), index(i + 1, j), index(i, j + 1)]);
      if (i + j + 1 < n) cells.push([index(i + 1, j), index(i + 1, j + 1), index(i, j + 1)]);
    }
  }
  return cells;
}

/** Values of the polynomials that belong to the nodes of degree n, at (xi, eta). */
function shapes(n, nodes, xi, eta) {
  const part = (count, x) => {
    let product = 1;
    for (let m = 0; m < count; m += 1) product *= (n * x - m) / (m + 1);
    return product;
  };
  const rest = 1 - xi - eta;
  return nodes.map(([i, j, k]) => part(i, xi) * part(j, eta) * part(k, rest));
}

/** The section's fields as the page carries them. */
class Field {
  constructor(data) {
    this.n = data.divisions;
    this.nodes = lattice(this.n);
    this.per = this.nodes.length;
    this.units = floats(data.fields, 3);
    this.places = floats(data.positions);
    this.origin = data.origin;
    this.piece = data.piece;
    this.pieces = data.pieces;
    this.yields = data.yields;
    this.excluded = data.excluded;
    this.triangles = this.piece.length;
  }

  /** Position of node p of triangle t. */
  place(t, p) {
    const k = 2 * (t * this.per + p);
    return [this.origin[0] + this.places[k], this.origin[1] + this.places[k + 1]];
  }

  /** Place and stress in triangle t where the nodes' polynomials have the values `shape`. */
  at(t, shape, forces) {
    let [x, y, sigma, tauX, tauY] = [0, 0, 0, 0, 0];
    for (let p = 0; p < this.per; p += 1) {
      const s = shape[p];
      if (s === 0) continue;
      const place = 2 * (t * this.per + p);
      x += s * this.places[place];
      y += s * this.places[place + 1];
      const u = COMPONENTS * (t * this.per + p);
      const c = this.units;
      sigma += s * (forces.N * c[u] + forces.Mx * c[u + 1] + forces.My * c[u + 2] + forces.B * c[u + 3]);
      tauX += s * (forces.Vx * c[u + 4] + forces.Vy * c[u + 6] + forces.T * c[u + 8]);
      tauY += s * (forces.Vx * c[u + 5] + forces.Vy * c[u + 7] + forces.T * c[u + 9]);
    }
    return { at: [this.origin[0] + x, this.origin[1] + y], sigma, tauX, tauY };
  }

  /** The circle of what is left out in which a point lies: close to a corner where stress has no limit. */
  around([x, y]) {
    return this.excluded.find(([cx, cy, r]) => Math.hypot(x - cx, y - cy) < r);
  }

  /** Whether a stress there may be quoted. */
  quotable(place) {
    return !this.around(place);
  }

  /** The triangle and reference coordinates of a point, or null outside of the material. */
  locate(point) {
    let best = null;
    for (let t = 0; t < this.triangles; t += 1) {
      const found = this.invert(t, point);
      if (found && (!best || found.miss < best.miss)) best = { t, ...found };
      if (best && best.miss === 0) break;
    }
    return best;
  }

  invert(t, point) {
    // Corners of the lattice: rest = n, i = n, j = n.
    const corner = [0, this.per - 1, this.n].map((p) => this.place(t, p));
    const [a, b, c] = corner;
    const size = Math.max(
      Math.hypot(b[0] - a[0], b[1] - a[1]),
      Math.hypot(c[0] - a[0], c[1] - a[1]),
      Math.hypot(c[0] - b[0], c[1] - b[1]),
    );
    if (corner.every((q) => Math.hypot(q[0] - point[0], q[1] - point[1]) > 1.2 * size)) return null;
    const det = (b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1]);
    let [xi, eta] = [1 / 3, 1 / 3];
    for (let step = 0; step < 8; step += 1) {
      const here = this.position(t, xi, eta);
      const [dx, dy] = [point[0] - here[0], point[1] - here[1]];
      // The chord triangle's map is close enough to the curved one's for the steps to settle.
      xi += (dx * (c[1] - a[1]) - dy * (c[0] - a[0])) / det;
      eta += (dy * (b[0] - a[0]) - dx * (b[1] - a[1])) / det;
      if (Math.hypot(dx, dy) < 1e-7 * size) break;
    }
    const miss = Math.max(0, -xi, -eta, xi + eta - 1);
    return miss < 1e-3 ? { xi, eta, miss: miss < 1e-6 ? 0 : miss } : null;
  }

  position(t, xi, eta) {
    const shape = shapes(this.n, this.nodes, xi, eta);
    let [x, y] = this.origin;
    for (let p = 0; p < this.per; p += 1) {
      const k = 2 * (t * this.per + p);
      x += shape[p] * this.places[k];
      y += shape[p] * this.places[k + 1];
    }
    return [x, y];
  }
}

/** The point just outside of a circle in the direction of a point inside. */
function outTo([cx, cy, r], [x, y]) {
  const grow = ((1 + 1e-6) * r) / Math.hypot(x - cx, y - cy);
  return [cx + grow * (x - cx), cy + grow * (y - cy)];
}

/** Divisions of a triangle's sides where extremes are sought first, as the program does. */
const SEARCHED = 8;

/** Halvings of a lattice's line that find where it leaves what may be quoted. */
const RIM_HALVINGS = 24;

/**
 * The unit fields on a finer lattice, and the stresses there under the section forces last superposed. Behind the
 * lattice's points of all triangles come those of the rim: where its lines leave what may be quoted, since beside a
 * sharp corner the largest stress lies there.
 */
class Fine {
  constructor(field) {
    this.nodes = lattice(SEARCHED);
    this.per = this.nodes.length;
    this.points = this.per * field.triangles;
    const { points } = this;
    this.places = new Float64Array(2 * points);
    this.quotable = new Uint8Array(points);
    const units = new Float32Array(COMPONENTS * points);
    const shape = this.nodes.map(([i, j]) => shapes(field.n, field.nodes, i / SEARCHED, j / SEARCHED));
    for (let t = 0; t < field.triangles; t += 1) {
      for (let k = 0; k < this.per; k += 1) {
        const point = t * this.per + k;
        let [x, y] = field.origin;
        for (let p = 0; p < field.per; p += 1) {
          const s = shape[k][p];
          if (s === 0) continue;
          const node = t * field.per + p;
          x += s * field.places[2 * node];
          y += s * field.places[2 * node + 1];
          for (let c = 0; c < COMPONENTS; c += 1) {
            units[COMPONENTS * point + c] += s * field.units[COMPONENTS * node + c];
          }
        }
        [this.places[2 * point], this.places[2 * point + 1]] = [x, y];
        this.quotable[point] = field.quotable([x, y]) ? 1 : 0;
      }
    }
    this.findRim(field);
    this.units = new Float32Array(COMPONENTS * (points + this.rim.length));
    this.units.set(units);
    this.rim.forEach(({ t, xi, eta }, r) => {
      const weights = shapes(field.n, field.nodes, xi, eta);
      for (let c = 0; c < COMPONENTS; c += 1) {
        let sum = 0;
        for (let p = 0; p < field.per; p += 1) sum += weights[p] * field.units[COMPONENTS * (t * field.per + p) + c];
        this.units[COMPONENTS * (points + r) + c] = sum;
      }
    });
    const all = points + this.rim.length;
    this.stress = { sigma: new Float64Array(all), tauX: new Float64Array(all), tauY: new Float64Array(all) };
  }

  /** The points of the rim, triangle by triangle, and where those of each triangle start. */
  findRim(field) {
    const key = (a, b) => Math.min(a, b) * this.per + Math.max(a, b);
    const lines = new Map();
    for (const [a, b, c] of latticeCells(SEARCHED)) {
      for (const [from, to] of [[a, b], [b, c], [a, c]]) lines.set(key(from, to), [from, to]);
    }
    this.rim = [];
    this.rimStart = new Int32Array(field.triangles + 1);
    for (let t = 0; t < field.triangles; t += 1) {
      this.rimStart[t] = this.rim.length;
      const quotable = this.quotable.subarray(t * this.per, (t + 1) * this.per);
      if (quotable.every((q) => q === quotable[0])) continue;
      for (const [a, b] of lines.values()) {
        if (quotable[a] === quotable[b]) continue;
        const end = (p) => [this.nodes[p][0] / SEARCHED, this.nodes[p][1] / SEARCHED];
        let [good, bad] = quotable[a] ? [end(a), end(b)] : [end(b), end(a)];
        for (let k = 0; k < RIM_HALVINGS; k += 1) {
          const middle = [0.5 * (good[0] + bad[0]), 0.5 * (good[1] + bad[1])];
          if (field.quotable(field.position(t, ...middle))) good = middle;
          else bad = middle;
        }
        this.rim.push({ t, xi: good[0], eta: good[1] });
      }
    }
    this.rimStart[field.triangles] = this.rim.length;
  }

  /** Where a point lies in its triangle. */
  reference(point) {
    if (point >= this.points) return this.rim[point - this.points];
    const [i, j] = this.nodes[point % this.per];
    return { xi: i / SEARCHED, eta: j / SEARCHED };
  }

  superpose(f) {
    const { units } = this;
    const { sigma, tauX, tauY } = this.stress;
    for (let p = 0; p < sigma.length; p += 1) {
      const u = COMPONENTS * p;
      sigma[p] = f.N * units[u] + f.Mx * units[u + 1] + f.My * units[u + 2] + f.B * units[u + 3];
      tauX[p] = f.Vx * units[u + 4] + f.Vy * units[u + 6] + f.T * units[u + 8];
      tauY[p] = f.Vx * units[u + 5] + f.Vy * units[u + 7] + f.T * units[u + 9];
    }
  }

  /** The stress at a point, in an object that is used again. */
  at(point, into) {
    into.sigma = this.stress.sigma[point];
    into.tauX = this.stress.tauX[point];
    into.tauY = this.stress.tauY[point];
    return into;
  }
}

/** What can be shown and searched: name, value of a stress, whether it has a sign. */
const MEASURES = {
  von_mises: { name: "von Mises", of: (s) => Math.sqrt(s.sigma ** 2 + 3 * (s.tauX ** 2 + s.tauY ** 2)) },
  sigma: { name: "normal stress σ", of: (s) => s.sigma, signed: true },
  tau: { name: "shear stress τ", of: (s) => Math.hypot(s.tauX, s.tauY) },
  tau_x: { name: "shear stress τx", of: (s) => s.tauX, signed: true },
  tau_y: { name: "shear stress τy", of: (s) => s.tauY, signed: true },
  tresca: { name: "Tresca", of: (s) => Math.sqrt(s.sigma ** 2 + 4 * (s.tauX ** 2 + s.tauY ** 2)) },
  principal_1: {
    name: "principal stress σ1",
    of: (s) => 0.5 * s.sigma + Math.sqrt(0.25 * s.sigma ** 2 + s.tauX ** 2 + s.tauY ** 2),
    signed: true,
  },
  principal_3: {
    name: "principal stress σ3",
    of: (s) => 0.5 * s.sigma - Math.sqrt(0.25 * s.sigma ** 2 + s.tauX ** 2 + s.tauY ** 2),
    signed: true,
  },
};

/** The extremes that are listed: measure, and whether its least value is meant. */
const EXTREMES = [
  { key: "sigma_max", label: "largest σ", measure: "sigma" },
  { key: "sigma_min", label: "smallest σ", measure: "sigma", least: true },
  { key: "tau", label: "largest τ", measure: "tau" },
  { key: "von_mises", label: "largest von Mises", measure: "von_mises" },
  { key: "tresca", label: "largest Tresca", measure: "tresca" },
];

/** How many triangles are searched for each extreme. */
const STARTS = 4;

/** The extremes under `forces`: on the fine lattice, then climbed to inside the best few triangles. */
function extremes(field, fine, forces) {
  fine.superpose(forces);
  const wanted = [...EXTREMES];
  if (field.yields.some((y) => y)) {
    wanted.push({ key: "utilisation", label: "utilisation of yield", measure: "von_mises", use: true });
  }
  const score = (want, t, s) => {
    let value = MEASURES[want.measure].of(s);
    if (want.use) {
      const limit = field.yields[field.piece[t]];
      if (!limit) return -Infinity;
      value /= limit;
    }
    return want.least ? -value : value;
  };
  const found = bestTriangles(field, fine);
  return wanted.map((want) => {
    const starts = found[want.key];
    let top = null;
    for (const start of starts) {
      const end = climb(field, forces, start, (t, x) => score(want, t, x));
      if (!top || end.rank > top.rank) top = end;
    }
    if (!top) return { ...want, value: 0, at: [0, 0], piece: "" };
    const value = want.least ? -top.rank : top.rank;
    return { ...want, value, at: top.at, piece: field.pieces[field.piece[top.t]] };
  });
}

/**
 * The triangles with the largest stress on the fine lattice and the point where, by the key of an extreme. In one
 * pass and by squares instead of roots, since it follows every step of a slider.
 */
function bestTriangles(field, fine) {
  const { sigma, tauX, tauY } = fine.stress;
  const keys = ["sigma_max", "sigma_min", "tau", "von_mises", "tresca", "utilisation"];
  const found = keys.map(() => []);
  const ranks = new Float64Array(keys.length);
  const best = new Float64Array(keys.length);
  const where = new Int32Array(keys.length);
  const consider = (point, limit) => {
    const normal = sigma[point];
    const square = tauX[point] * tauX[point] + tauY[point] * tauY[point];
    ranks[0] = normal;
    ranks[1] = -normal;
    ranks[2] = square;
    ranks[3] = normal * normal + 3 * square;
    ranks[4] = ranks[3] + square;
    ranks[5] = limit ? ranks[3] / (limit * limit) : -Infinity;
    for (let k = 0; k < ranks.length; k += 1) {
      if (ranks[k] > best[k]) [best[k], where[k]] = [ranks[k], point];
    }
  };
  for (let t = 0; t < field.triangles; t += 1) {
    const limit = field.yields[field.piece[t]];
    best.fill(-Infinity);
    for (let point = t * fine.per; point < (t + 1) * fine.per; point += 1) {
      if (fine.quotable[point]) consider(point, limit);
    }
    for (let r = fine.rimStart[t]; r < fine.rimStart[t + 1]; r += 1) consider(fine.points + r, limit);
    found.forEach((starts, k) => {
      if (!(best[k] > (starts[STARTS - 1]?.rank ?? -Infinity))) return;
      const { xi, eta } = fine.reference(where[k]);
      starts.push({ rank: best[k], t, xi, eta });
      starts.sort((one, other) => other.rank - one.rank);
      starts.length = Math.min(starts.length, STARTS);
    });
  }
  return Object.fromEntries(keys.map((key, k) => [key, found[k]]));
}

/**
 * Steps along the directions of the three sides, halved whenever none of them gains. A step that would leave what
 * may be quoted goes to its rim, so that the search slides along it.
 */
function climb(field, forces, start, score) {
  let { xi, eta } = start;
  const look = (x, e) => {
    const stress = field.at(start.t, shapes(field.n, field.nodes, x, e), forces);
    return { stress, at: stress.at, rank: field.quotable(stress.at) ? score(start.t, stress) : -Infinity };
  };
  let best = look(xi, eta);
  let step = 0.5 / SEARCHED;
  for (let halvings = 0; halvings < 9; ) {
    let gained = false;
    for (const [dx, de] of [[1, 0], [-1, 0], [0, 1], [0, -1], [1, -1], [-1, 1]]) {
      let [x, e] = [xi + step * dx, eta + step * de];
      if (x < 0 || e < 0 || x + e > 1) continue;
      const place = field.position(start.t, x, e);
      const circle = field.around(place);
      if (circle) {
        const onRim = field.invert(start.t, outTo(circle, place));
        if (!onRim || onRim.miss > 0) continue;
        [x, e] = [onRim.xi, onRim.eta];
      }
      const next = look(x, e);
      if (next.rank > best.rank) {
        [best, xi, eta, gained] = [next, x, e, true];
        break;
      }
    }
    if (!gained) {
      step *= 0.5;
      halvings += 1;
    }
  }
  return { ...best, t: start.t };
}
