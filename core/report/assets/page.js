// SPDX-License-Identifier: MIT
// Turns the pictures of the report into plots that can be read point by point. Without it the page says the same.
(() => {
  'use strict';
  const root = document.documentElement;
  const family = () => (document.getElementById('units-us').checked ? 'us' : 'si');
  const colour = (name) => getComputedStyle(root).getPropertyValue('--' + name).trim();
  const element = (name, attributes, ...children) => {
    const made = document.createElement(name);
    for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
    made.append(...children);
    return made;
  };

  // Figures enough to tell two neighbours apart on an axis of this reach.
  const spoken = (value, reach) => {
    if (value == null || !isFinite(value)) return '–';
    const places = Math.max(0, Math.min(9, 3 - Math.floor(Math.log10(Math.abs(reach) || 1))));
    return value.toFixed(places).replace('-', '−');
  };

  const swatch = (curve) => {
    const ns = 'http://www.w3.org/2000/svg';
    const svg = document.createElementNS(ns, 'svg');
    svg.setAttribute('viewBox', '0 0 32 10');
    svg.setAttribute('aria-hidden', 'true');
    const line = document.createElementNS(ns, 'path');
    line.setAttribute('d', curve.shape === 'dots' ? 'M4 5h0M16 5h0M28 5h0' : 'M0 5H32');
    if (curve.shape === 'dots') line.setAttribute('stroke-linecap', 'round');
    line.setAttribute('stroke-width', curve.shape === 'dots' ? 4 : curve.width < 1 ? 1.2 : 2.4);
    if (curve.dash.length) line.setAttribute('stroke-dasharray', curve.dash.join(' '));
    line.style.stroke = 'var(--' + curve.ink + ')';
    svg.append(line);
    return svg;
  };

  // Names beside the ends of their curves, pushed apart but in order.
  const spread = (labels, top, bottom, step) => {
    labels.sort((a, b) => a.y - b.y);
    let next = top;
    for (const label of labels) { label.y = Math.max(label.y, next); next = label.y + step; }
    let limit = bottom;
    for (const label of labels.slice().reverse()) { label.y = Math.min(label.y, limit); limit = label.y - step; }
  };

  const plotOf = (figure) => {
    const data = JSON.parse(figure.querySelector('script.plot-data').textContent);
    const live = figure.querySelector('.live') || figure.insertBefore(element('div', { class: 'live' }), figure.querySelector('.picture'));
    live.textContent = '';
    figure.classList.add('is-live');
    const inX = data.x.units[family()], inY = data.y.units[family()];
    const toX = (v) => v * inX.scale + inX.offset, toY = (v) => v * inY.scale + inY.offset;
    const titled = (axis, unit) => (unit.unit ? axis.label + ', ' + unit.unit : axis.label);
    const x = data.abscissa.map(toX);
    const ys = data.curves.map((c) => c.y.map((v) => (v == null ? null : toY(v))));
    const whole = [toX(data.x.low), toX(data.x.high)];
    const wholeY = [toY(data.y.low), toY(data.y.high)];
    const stepped = data.curves.some((c) => c.shape === 'step');
    const upright = data.levels.filter((l) => l.upright), level = data.levels.filter((l) => !l.upright);
    const shown = data.curves.map(() => true);
    const pixels = devicePixelRatio || 1;

    const measuring = document.createElement('canvas').getContext('2d');
    const font = (size) => size + 'px ' + getComputedStyle(document.body).fontFamily;
    measuring.font = font(12);
    const labelled = (c) => (c.shape === 'line' || c.shape === 'ground') && c.width >= 1;  // edges of bands carry no name
    const named = data.curves.filter(labelled).map((c) => c.name);
    const widest = Math.max(0, ...named.concat(level.map((l) => l.name)).map((n) => measuring.measureText(n).width));
    const right = Math.min(220, widest + 16);

    // Names of upright lines, in as many rows above the plot as they need.
    const rowsOf = (position, low, high) => {
      const taken = [], rows = [];
      for (const l of upright.slice().sort((a, b) => a.value - b.value)) {
        const at = position(toX(l.value));
        if (at < low - 1 || at > high + 1) continue;
        const half = measuring.measureText(l.name).width / 2 + 5;
        let row = taken.findIndex((t) => t <= at - half);
        if (row < 0) row = taken.push(0) - 1;
        taken[row] = at + half;
        rows.push({ l, at, row });
      }
      rows.count = taken.length;
      return rows;
    };

    const haloed = (ctx, text, tx, ty) => {
      ctx.lineWidth = 4 * pixels;
      ctx.strokeStyle = colour('paper');
      ctx.lineJoin = 'round';
      ctx.strokeText(text, tx, ty);
      ctx.fillStyle = colour('ink');
      ctx.fillText(text, tx, ty);
    };

    const drawLevels = (u, ctx) => {
      for (const l of data.levels) {
        ctx.strokeStyle = colour(l.ink);
        ctx.lineWidth = 1.4 * pixels;
        ctx.setLineDash(l.dash.map((d) => d * pixels));
        ctx.beginPath();
        if (l.upright) {
          const at = u.valToPos(toX(l.value), 'x', true);
          ctx.moveTo(at, u.bbox.top);
          ctx.lineTo(at, u.bbox.top + u.bbox.height);
        } else {
          const at = u.valToPos(toY(l.value), 'y', true);
          ctx.moveTo(u.bbox.left, at);
          ctx.lineTo(u.bbox.left + u.bbox.width, at);
        }
        ctx.stroke();
      }
      ctx.setLineDash([]);
    };

    const drawStretches = (u, ctx) => {
      for (const s of data.stretches) {
        const from = Math.max(u.bbox.left, u.valToPos(toX(s.from), 'x', true));
        const to = Math.min(u.bbox.left + u.bbox.width, u.valToPos(toX(s.to), 'x', true));
        if (!(to > from)) continue;
        ctx.save();
        ctx.beginPath();
        ctx.rect(from, u.bbox.top, to - from, u.bbox.height);
        ctx.clip();
        ctx.strokeStyle = colour('vermilion');
        ctx.globalAlpha = 0.45;
        ctx.lineWidth = 1.6 * pixels;
        ctx.beginPath();
        for (let at = from - u.bbox.height; at < to; at += 10 * pixels) {
          ctx.moveTo(at, u.bbox.top + u.bbox.height);
          ctx.lineTo(at + u.bbox.height, u.bbox.top);
        }
        ctx.stroke();
        ctx.restore();
        ctx.font = font(12 * pixels);
        if (ctx.measureText(s.name).width + 8 * pixels > to - from) continue;
        ctx.textAlign = 'center';
        haloed(ctx, s.name, (from + to) / 2, u.bbox.top + 16 * pixels);
      }
    };

    const drawPoints = (u, ctx) => {
      const taken = [];
      ctx.setLineDash([]);
      ctx.textAlign = 'center';
      for (const p of data.points) {
        if (p.x == null || p.y == null) continue;
        const px = u.valToPos(toX(p.x), 'x', true), py = u.valToPos(toY(p.y), 'y', true);
        if (px < u.bbox.left - 1 || px > u.bbox.left + u.bbox.width + 1) continue;
        ctx.beginPath();
        ctx.arc(px, py, 4 * pixels, 0, 2 * Math.PI);
        ctx.fillStyle = colour('paper');
        ctx.strokeStyle = colour(p.ink);
        ctx.lineWidth = 2 * pixels;
        ctx.fill();
        ctx.stroke();
        const half = ctx.measureText(p.name).width / 2 + 4 * pixels;
        const tx = Math.max(u.bbox.left + half, Math.min(u.bbox.left + u.bbox.width - half, px));
        // Above the point, else below it, else further away: where no other name stands.
        const free = (y) => y > u.bbox.top + 10 * pixels && y < u.bbox.top + u.bbox.height &&
          taken.every((t) => Math.abs(t.y - y) >= 14 * pixels || Math.abs(t.x - tx) >= t.half + half);
        const ty = [-10, 20, -25, 35, -40, 50].map((d) => py + d * pixels).find(free) ?? py - 10 * pixels;
        taken.push({ x: tx, y: ty, half });
        haloed(ctx, p.name, tx, ty);
      }
    };

    const drawNames = (u, ctx) => {
      const end = u.bbox.left + u.bbox.width;
      const labels = [];
      const keep = (name, ink, y) => {
        if (y >= u.bbox.top - 2 && y <= u.bbox.top + u.bbox.height + 2) labels.push({ name, ink, y });
      };
      const lastX = u.scales.x.max;
      data.curves.forEach((c, i) => {
        if (!labelled(c) || !shown[i]) return;
        for (let k = x.length - 1; k >= 0; --k)
          if (ys[i][k] != null && x[k] <= lastX) { keep(c.name, c.ink, u.valToPos(ys[i][k], 'y', true)); break; }
      });
      for (const l of level) keep(l.name, l.ink, u.valToPos(toY(l.value), 'y', true));
      spread(labels, u.bbox.top, u.bbox.top + u.bbox.height, 15 * pixels);
      ctx.textAlign = 'left';
      for (const l of labels) {
        ctx.fillStyle = colour(l.ink);
        ctx.fillText(l.name, end + 7 * pixels, l.y + 4 * pixels);
      }
      ctx.textAlign = 'center';
      const stack = rowsOf((v) => u.valToPos(v, 'x', true) / pixels, u.bbox.left / pixels, end / pixels);
      for (const { l, at, row } of stack) {
        ctx.fillStyle = colour(l.ink);
        ctx.fillText(l.name, at * pixels, u.bbox.top - (6 + 15 * (stack.count - 1 - row)) * pixels);
      }
    };

    const where = element('span', { class: 'where' });
    const slider = element('input', { type: 'range', min: 0, max: x.length - 1, step: 1, value: 0, 'aria-label': 'Read ' + data.title + ' at' });
    const values = data.curves.map(() => element('span', { class: 'value' }));
    const reachX = whole[1] - whole[0], reachY = wholeY[1] - wholeY[0];
    const read = (k) => {
      if (k == null || k < 0 || k >= x.length) return;
      slider.value = k;
      const here = spoken(x[k], reachX) + ' ' + inX.unit;
      where.textContent = data.x.label + ' ' + here;
      const parts = [here];
      data.curves.forEach((c, i) => {
        const text = ys[i][k] == null ? '–' : spoken(ys[i][k], reachY) + ' ' + inY.unit;
        values[i].textContent = text;
        if (shown[i] && ys[i][k] != null) parts.push(c.name + ' ' + text);
      });
      slider.setAttribute('aria-valuetext', parts.join(', '));
    };

    const line = (c) => ({
      label: c.name,
      stroke: () => colour(c.ink),
      width: c.width,
      dash: c.dash,
      spanGaps: true,
      points: c.shape === 'dots' ? { show: true, size: 4, width: 0, fill: () => colour(c.ink) + '90', stroke: () => 'transparent' } : { show: false },
      paths: c.shape === 'step' ? uPlot.paths.stepped({ align: 1 }) : c.shape === 'dots' ? () => null : undefined,
      fill: c.shape === 'ground' ? () => colour('soil') : c.shape === 'step' ? () => colour(c.ink) + '30' : undefined,
      fillTo: c.shape === 'ground' ? (u) => u.scales.y.min : 0,
    });
    // All marks of an axis with the same number of decimals.
    const marks = (self, splits) => {
      const step = splits.length > 1 ? Math.abs(splits[1] - splits[0]) : 1;
      const places = Math.max(0, Math.min(9, Math.ceil(-Math.log10(step) - 1e-9) + (Math.abs(step / 10 ** Math.floor(Math.log10(step)) - 2.5) < 1e-6 ? 1 : 0)));
      return splits.map((v) => v.toFixed(places).replace('-', '−'));
    };
    const axis = (name, label) => ({
      scale: name,
      label,
      labelSize: 22,
      size: name === 'x' ? 34 : 58,
      values: marks,
      font: font(12),
      labelFont: font(12),
      stroke: () => colour('muted'),
      grid: { show: name === 'y', stroke: () => colour('rule'), width: 1 },
      ticks: { stroke: () => colour('muted'), width: 1, size: name === 'x' ? 5 : 0 },
      border: { show: name === 'x', stroke: () => colour('muted'), width: 1 },
    });
    const isWhole = (u) => Math.abs(u.scales.x.min - whole[0]) + Math.abs(u.scales.x.max - whole[1]) < 1e-9 * reachX;
    const wide = Math.max(280, live.clientWidth), inner = wide - 70 - right;
    const topRows = rowsOf((v) => 70 + (v - whole[0]) / (whole[1] - whole[0]) * inner, 0, wide).count;
    const size = () => ({ width: Math.max(280, live.clientWidth), height: (stepped ? 270 : 350) + 15 * topRows });
    let u = null;
    const options = {
      ...size(),
      legend: { show: false },
      padding: [14 + 15 * topRows, right, 0, 0],
      cursor: { drag: { x: true, y: false }, points: { size: stepped ? 0 : 7 } },
      scales: {
        x: { time: false, range: (self, low, high) => (low === x[0] && high === x[x.length - 1] ? whole : [low, high]) },
        y: {
          range: (self, low, high) => {
            if (isWhole(self) || low == null) return wholeY;
            if (stepped) return [0, high * 1.06];
            const air = Math.max(0.06 * (high - low), 1e-6 * reachY);
            return [low - air, high + air];
          },
        },
      },
      axes: [axis('x', titled(data.x, inX)), axis('y', titled(data.y, inY))],
      series: [{ label: data.x.label }].concat(data.curves.map(line)),
      bands: data.fills.map((f) => ({ series: [f.upper + 1, f.lower + 1], fill: () => colour(f.ink) + '2e' })),
      hooks: {
        setCursor: [(self) => { if (self.cursor.idx != null) read(self.cursor.idx); }],
        draw: [(self) => {
          const ctx = self.ctx;
          ctx.save();
          ctx.beginPath();
          ctx.rect(self.bbox.left, self.bbox.top, self.bbox.width, self.bbox.height);
          ctx.clip();
          drawStretches(self, ctx);
          drawLevels(self, ctx);
          ctx.restore();
          ctx.save();
          ctx.font = font(12 * pixels);
          drawPoints(self, ctx);
          drawNames(self, ctx);
          ctx.restore();
        }],
      },
    };
    u = new uPlot(options, [x].concat(ys), live);
    u.root.setAttribute('role', 'img');
    u.root.setAttribute('aria-label', data.title);

    const point = (k) => {
      u.setCursor({ left: u.valToPos(x[k], 'x'), top: u.bbox.height / pixels / 2 });
      read(k);
    };
    slider.addEventListener('input', () => point(Number(slider.value)));
    const zoom = (factor) => {
      const k = Number(slider.value), { min, max } = u.scales.x;
      const reach = Math.min(reachX, (max - min) * factor);
      const middle = x[k] >= min && x[k] <= max ? x[k] : (min + max) / 2;
      const low = Math.max(whole[0], Math.min(whole[1] - reach, middle - reach / 2));
      u.setScale('x', reach >= reachX ? { min: x[0], max: x[x.length - 1] } : { min: low, max: low + reach });
    };
    const button = (text, act) => {
      const made = element('button', { type: 'button' }, text);
      made.addEventListener('click', act);
      return made;
    };
    live.append(element('div', { class: 'reading' }, where, slider, button('Closer', () => zoom(0.5)), button('Wider', () => zoom(2)), button('Whole', () => zoom(Infinity))));
    const list = element('ul', { class: 'curves' });
    // Lines first, the edges of their bands behind them.
    const edge = (c) => (c.shape === 'line' && c.width < 1 ? 1 : 0);
    const order = data.curves.map((c, i) => i).sort((a, b) => edge(data.curves[a]) - edge(data.curves[b]));
    order.forEach((i) => {
      const c = data.curves[i];
      const box = element('input', { type: 'checkbox' });
      box.checked = true;
      box.addEventListener('change', () => {
        shown[i] = box.checked;
        u.setSeries(i + 1, { show: box.checked });
      });
      list.append(element('li', {}, element('label', {}, box, swatch(c), c.name, values[i])));
    });
    live.append(list);
    read(0);
    figure.uplot = u;
    figure.fit = () => { const s = size(); if (s.width !== u.width) u.setSize(s); };
  };

  // A figure in a folded block has no width until it is opened.
  addEventListener('toggle', (event) => {
    for (const f of event.target.querySelectorAll('figure.figure')) f.fit();
  }, true);

  const figures = Array.from(document.querySelectorAll('figure.figure'));
  figures.forEach(plotOf);
  addEventListener('resize', () => figures.forEach((f) => f.fit()));
  matchMedia('(prefers-color-scheme: dark)').addEventListener('change', () => figures.forEach((f) => f.uplot.redraw()));
  for (const id of ['units-si', 'units-us'])
    document.getElementById(id).addEventListener('change', () => figures.forEach((f) => { f.uplot.destroy(); plotOf(f); }));
  root.setAttribute('data-ready', 'yes');
})();
