"use strict";
// Zoom and pan, layers on and off, and the value under the pointer. Without
// this script the page says the same, only less handily.
(function () {
  const MOST_ZOOM = 40;
  const OUTSIDE = 65535;

  // The packed values of a map: see src/report/grid.rs.
  function valuesOf(figure) {
    const bytes = Uint8Array.from(atob(figure.dataset.values), (c) => c.charCodeAt(0));
    const view = new DataView(bytes.buffer);
    const columns = Number(figure.dataset.columns);
    const rows = Number(figure.dataset.rows);
    const low = Number(figure.dataset.low);
    const step = Number(figure.dataset.step);
    const at = (column, row) => {
      const packed = view.getUint16(2 * (row * columns + column), true);
      return packed === OUTSIDE ? NaN : low + step * packed;
    };
    // Bilinear between nodes; beside the aquifer's edge from the nodes within.
    return (x, y) => {
      const u = Math.min(Math.max(x, 0), 1) * (columns - 1);
      const v = Math.min(Math.max(y, 0), 1) * (rows - 1);
      const column = Math.min(Math.floor(u), columns - 2);
      const row = Math.min(Math.floor(v), rows - 2);
      if (Number.isNaN(at(Math.round(u), Math.round(v)))) return NaN;
      let sum = 0;
      let weights = 0;
      for (const [dc, dr] of [[0, 0], [1, 0], [0, 1], [1, 1]]) {
        const value = at(column + dc, row + dr);
        const weight = (1 - Math.abs(u - column - dc)) * (1 - Math.abs(v - row - dr));
        if (!Number.isNaN(value)) {
          sum += weight * value;
          weights += weight;
        }
      }
      return weights > 0 ? sum / weights : NaN;
    };
  }

  function grouped(value, decimals) {
    const text = value.toLocaleString("en-US", { minimumFractionDigits: decimals, maximumFractionDigits: decimals });
    return text.replace("-", "−");
  }

  function roundLength(longest) {
    const power = 10 ** Math.floor(Math.log10(longest));
    return [5, 2, 1].map((step) => step * power).find((length) => length <= longest) || power;
  }

  function MapOf(figure) {
    const svg = figure.querySelector("svg.map");
    const view = svg.querySelector(".view");
    const bar = svg.querySelector(".scale");
    const readout = figure.querySelector(".readout");
    const [left, top, width, height] = figure.dataset.frame.split(" ").map(Number);
    const [west, north, unitsAPixel] = figure.dataset.planGrid.split(" ").map(Number);
    const valueAt = valuesOf(figure);
    const idle = readout.textContent;
    let zoom = 1;
    let shift = [0, 0];

    function drawScale() {
      const pixelsAUnit = Number(bar.dataset.pixelsAUnit) * zoom;
      const length = roundLength((0.22 * width) / pixelsAUnit);
      const half = (length * pixelsAUnit) / 2;
      const [, first, second] = bar.querySelectorAll("rect");
      bar.querySelector("rect").setAttribute("width", 2 * half + 66);
      first.setAttribute("width", half);
      second.setAttribute("width", half);
      second.setAttribute("x", half);
      const end = bar.querySelectorAll("text")[1];
      end.setAttribute("x", 2 * half - 8);
      end.textContent = `${Number(length.toPrecision(3))} ${bar.dataset.unit}`;
    }

    function draw() {
      shift = [
        Math.min(0, Math.max(shift[0], width * (1 - zoom))),
        Math.min(0, Math.max(shift[1], height * (1 - zoom))),
      ];
      view.setAttribute("transform", `translate(${shift[0]} ${shift[1]}) scale(${zoom})`);
      view.style.setProperty("--keep", String(1 / zoom));
      figure.classList.toggle("zoomed", zoom > 1);
      drawScale();
    }

    // A place on the screen in the map's pixels.
    function onMap(x, y) {
      const place = new DOMPoint(x, y).matrixTransform(svg.getScreenCTM().inverse());
      return [place.x - left, place.y - top];
    }

    function zoomBy(factor, [x, y]) {
      const next = Math.min(Math.max(zoom * factor, 1), MOST_ZOOM);
      shift = [x - ((x - shift[0]) * next) / zoom, y - ((y - shift[1]) * next) / zoom];
      zoom = next;
      draw();
    }

    function tell([x, y]) {
      if (x < 0 || y < 0 || x > width || y > height) {
        readout.textContent = idle;
        return;
      }
      const place = [(x - shift[0]) / zoom, (y - shift[1]) / zoom];
      const value = valueAt(place[0] / width, place[1] / height);
      const east = grouped(west + place[0] * unitsAPixel, 0);
      const up = grouped(north - place[1] * unitsAPixel, 0);
      const told = Number.isNaN(value)
        ? "outside the aquifer"
        : `${figure.dataset.quantity} ${grouped(value, 2)} ${figure.dataset.unit}`;
      readout.textContent = `East ${east}, north ${up}: ${told}`;
    }

    const held = new Map();
    function spread() {
      const [a, b] = [...held.values()];
      return Math.hypot(a[0] - b[0], a[1] - b[1]);
    }
    svg.addEventListener("pointerdown", (event) => {
      held.set(event.pointerId, onMap(event.clientX, event.clientY));
      if (zoom > 1) svg.setPointerCapture(event.pointerId);
    });
    svg.addEventListener("pointermove", (event) => {
      const here = onMap(event.clientX, event.clientY);
      const before = held.get(event.pointerId);
      if (before && held.size === 1 && zoom > 1) {
        shift = [shift[0] + here[0] - before[0], shift[1] + here[1] - before[1]];
        draw();
      }
      if (before) {
        const apart = held.size === 2 ? spread() : 0;
        held.set(event.pointerId, here);
        if (apart > 0) zoomBy(spread() / apart, here);
      }
      tell(here);
    });
    for (const name of ["pointerup", "pointercancel", "pointerleave"]) {
      svg.addEventListener(name, (event) => held.delete(event.pointerId));
    }
    svg.addEventListener("wheel", (event) => {
      // A bare wheel scrolls the page.
      if (!event.ctrlKey && !event.metaKey) return;
      event.preventDefault();
      zoomBy(Math.exp(-event.deltaY / 300), onMap(event.clientX, event.clientY));
    }, { passive: false });
    svg.addEventListener("dblclick", (event) => zoomBy(2, onMap(event.clientX, event.clientY)));

    const middle = [width / 2, height / 2];
    const steps = { in: 1.6, out: 1 / 1.6, whole: 0 };
    for (const button of figure.querySelectorAll("[data-zoom]")) {
      button.addEventListener("click", () => zoomBy(steps[button.dataset.zoom], middle));
    }
    svg.parentElement.addEventListener("keydown", (event) => {
      const moves = { ArrowLeft: [60, 0], ArrowRight: [-60, 0], ArrowUp: [0, 60], ArrowDown: [0, -60] };
      if (event.key === "+" || event.key === "=") zoomBy(steps.in, middle);
      else if (event.key === "-") zoomBy(steps.out, middle);
      else if (event.key === "0") zoomBy(0, middle);
      else if (zoom > 1 && moves[event.key]) {
        const [dx, dy] = moves[event.key];
        shift = [shift[0] + dx, shift[1] + dy];
        draw();
      } else return;
      event.preventDefault();
    });
    for (const box of figure.querySelectorAll("input[type=checkbox]")) {
      box.addEventListener("change", () => {
        for (const layer of svg.querySelectorAll(`[data-layer="${box.value}"]`)) {
          layer.classList.toggle("off", !box.checked);
        }
      });
    }
    // On a narrow screen the map's middle comes first.
    const strip = svg.parentElement;
    strip.scrollLeft = (strip.scrollWidth - strip.clientWidth) / 2;
    figure.classList.add("live");
    figure.querySelector(".controls").hidden = false;
    readout.hidden = false;
    window.addEventListener("beforeprint", () => zoomBy(0, middle));
  }

  for (const figure of document.querySelectorAll(".map-figure")) MapOf(figure);
})();
