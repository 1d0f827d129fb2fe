"use strict";
(() => {
  // Tables: a click on a column head sorts by the full value of the numbers, else by text.
  for (const table of document.querySelectorAll("table.sortable")) {
    const heads = [...table.querySelectorAll("thead th")];
    heads.forEach((head, column) => {
      const button = document.createElement("span");
      button.tabIndex = 0;
      button.setAttribute("role", "button");
      button.addEventListener("keydown", (event) => {
        if (event.key !== "Enter" && event.key !== " ") return;
        event.preventDefault();
        button.click();
      });
      button.append(...head.childNodes);
      head.append(button);
      button.addEventListener("click", () => {
        const falling = head.getAttribute("aria-sort") === "ascending";
        heads.forEach((other) => other.removeAttribute("aria-sort"));
        head.setAttribute("aria-sort", falling ? "descending" : "ascending");
        const body = table.tBodies[0];
        const key = (row) => row.cells[column];
        const compare = (a, b) => {
          const [x, y] = [key(a), key(b)];
          const [u, v] = [x.dataset.value, y.dataset.value];
          if (u !== undefined && v !== undefined) return Number(u) - Number(v);
          if (u !== undefined || v !== undefined) return u === undefined ? 1 : -1;
          return x.textContent.localeCompare(y.textContent, "en");
        };
        const rows = [...body.rows].sort(compare);
        if (falling) rows.reverse();
        body.append(...rows);
      });
    });
  }

  const holder = document.getElementById("fields");
  if (!holder) return;
  const fields = JSON.parse(holder.textContent);
  const decoded = new Map();
  const grid = (index, quantity) => {
    const name = quantity + index;
    if (!decoded.has(name)) {
      const source = fields.depths[index][quantity];
      const bytes = Uint8Array.from(atob(source.data), (c) => c.charCodeAt(0));
      decoded.set(name, { ...source, values: new DataView(bytes.buffer) });
    }
    return decoded.get(name);
  };
  const valueAt = (index, quantity, x, z) => {
    const { x_m, z_m } = fields.window;
    const { columns, rows, step, values } = grid(index, quantity);
    const column = Math.floor(((x - x_m[0]) / (x_m[1] - x_m[0])) * columns);
    const row = Math.floor(((z_m[1] - z) / (z_m[1] - z_m[0])) * rows);
    if (column < 0 || row < 0 || column >= columns || row >= rows) return undefined;
    const raw = values.getInt16(2 * (row * columns + column), true);
    return raw === -32768 ? null : raw * step;
  };
  const words = (quantity, value) => {
    if (value === null) return "no rock";
    if (quantity === "utilization") return "utilization " + value.toFixed(2);
    const size = Math.abs(value);
    return size.toFixed(size < 100 ? 1 : 0) + " kPa " + (value < 0 ? "compression" : "tension");
  };

  // Hover: the value at the pointer; with the keyboard, arrow keys move the place.
  const follow = (figure) => {
    const readout = document.createElement("div");
    readout.className = "readout";
    readout.hidden = true;
    readout.setAttribute("role", "status");
    figure.append(readout);
    let place = null;
    const show = (x, z) => {
      const value = valueAt(Number(figure.dataset.index), figure.dataset.quantity, x, z);
      readout.hidden = value === undefined;
      if (value === undefined) return;
      place = [x, z];
      readout.textContent = "x " + x.toFixed(1) + " m, z " + z.toFixed(1) + " m: " + words(figure.dataset.quantity, value);
    };
    figure.addEventListener("pointermove", (event) => {
      const svg = event.target.closest("svg");
      if (!svg) return;
      const p = new DOMPoint(event.clientX, event.clientY).matrixTransform(svg.getScreenCTM().inverse());
      const w = fields.window;
      show(w.x_m[0] + (p.x - w.left) / w.px_per_m, w.z_m[1] - (p.y - w.top) / w.px_per_m);
    });
    figure.addEventListener("pointerleave", () => { readout.hidden = true; });
    figure.addEventListener("keydown", (event) => {
      const moves = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] };
      const move = moves[event.key];
      if (!move) return;
      event.preventDefault();
      const w = fields.window;
      const step = (w.x_m[1] - w.x_m[0]) / 60;
      const from = place || [(w.x_m[0] + w.x_m[1]) / 2, (w.z_m[0] + w.z_m[1]) / 2];
      show(from[0] + step * move[0], from[1] + step * move[1]);
    });
  };
  document.querySelectorAll("figure.hoverable").forEach(follow);

  // Slider: shows the prepared figure of the chosen depth.
  const explorer = document.getElementById("explorer");
  const stage = document.getElementById("stage");
  const slider = document.getElementById("depth");
  const shown = document.getElementById("depth-shown");
  const update = () => {
    const index = Number(slider.value);
    const quantity = explorer.querySelector("input[name=quantity]:checked").value;
    const template = document.querySelector(`template[data-index="${index}"][data-quantity="${quantity}"]`);
    stage.firstElementChild.replaceChildren(template.content.cloneNode(true));
    stage.dataset.index = String(index);
    stage.dataset.quantity = quantity;
    const text = fields.depths[index].depth_m.toFixed(2) + " m";
    shown.value = text;
    slider.setAttribute("aria-valuetext", text);
  };
  const first = document.querySelector("figure.hoverable[data-index]");
  if (first) slider.value = first.dataset.index;
  explorer.addEventListener("input", update);
  explorer.hidden = false;
  update();
})();
