// The line of action of the shear force: a handle on the picture that can be dragged or moved by keys.

class LineOfAction {
  /** `svg` lies over the canvas; `moved(at)` is called with the point in the section's axes. */
  constructor(svg, picture, centre, moved) {
    this.svg = svg;
    this.picture = picture;
    this.centre = centre;
    this.moved = moved;
    this.at = [...centre];
    const make = (name, kind, parent = svg) => {
      const node = document.createElementNS("http://www.w3.org/2000/svg", name);
      node.setAttribute("class", kind);
      parent.append(node);
      return node;
    };
    this.mark = make("path", "shear-centre");
    this.line = make("line", "action-line");
    this.arrow = make("path", "action-arrow");
    this.handle = make("circle", "action-handle");
    this.handle.setAttribute("r", "9");
    this.handle.setAttribute("tabindex", "0");
    this.handle.setAttribute("role", "application");
    this.handle.setAttribute("id", "handle");
    this.handle.setAttribute(
      "aria-label",
      "Point of the line of action of the shear force. Arrow keys move it, with Shift ten times as far, Home puts it on the shear centre.",
    );
    // Where on the handle it is held: the handle must not jump to the pointer.
    let held = [0, 0];
    this.handle.addEventListener("pointerdown", (event) => {
      const [x, y] = picture.toCanvas(this.at);
      held = [x - event.clientX, y - event.clientY];
      this.handle.setPointerCapture(event.pointerId);
      event.preventDefault();
      this.handle.focus();
    });
    this.handle.addEventListener("pointermove", (event) => {
      if (!this.handle.hasPointerCapture(event.pointerId)) return;
      this.set(picture.toSection([held[0] + event.clientX, held[1] + event.clientY]));
    });
    this.handle.addEventListener("keydown", (event) => this.key(event));
  }

  key(event) {
    const { x0, x1, y0, y1 } = this.picture.box;
    const step = (Math.max(x1 - x0, y1 - y0) / 200) * (event.shiftKey ? 10 : 1);
    const by = { ArrowLeft: [-step, 0], ArrowRight: [step, 0], ArrowDown: [0, -step], ArrowUp: [0, step] }[event.key];
    if (event.key === "Home") this.set(this.centre);
    else if (by) this.set([this.at[0] + by[0], this.at[1] + by[1]]);
    else return;
    event.preventDefault();
  }

  set(at) {
    this.at = [...at];
    this.moved(this.at);
  }

  /** Draws the line for a shear force (vx, vy). */
  draw(vx, vy) {
    const [w, h] = this.picture.size;
    this.svg.setAttribute("viewBox", `0 0 ${w} ${h}`);
    this.svg.style.height = `${h}px`;
    const [cx, cy] = this.picture.toCanvas(this.centre);
    this.mark.setAttribute("d", `M${cx - 6} ${cy}H${cx + 6}M${cx} ${cy - 6}V${cy + 6}`);
    const [x, y] = this.picture.toCanvas(this.at);
    this.handle.setAttribute("cx", x);
    this.handle.setAttribute("cy", y);
    const size = Math.hypot(vx, vy);
    const on = size > 0;
    this.line.style.display = on ? "" : "none";
    this.arrow.style.display = on ? "" : "none";
    if (!on) return;
    const [dx, dy] = [vx / size, -vy / size];
    const far = w + h;
    this.line.setAttribute("x1", x - far * dx);
    this.line.setAttribute("y1", y - far * dy);
    this.line.setAttribute("x2", x + far * dx);
    this.line.setAttribute("y2", y + far * dy);
    const [tx, ty] = [x + 46 * dx, y + 46 * dy];
    const head = (s) => `L${tx - 9 * dx - s * 5 * dy} ${ty - 9 * dy + s * 5 * dx}`;
    this.arrow.setAttribute("d", `M${x} ${y}L${tx} ${ty}M${tx} ${ty}${head(1)}M${tx} ${ty}${head(-1)}`);
  }
}
