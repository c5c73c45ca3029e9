(function () {
  "use strict";
  var root = document.getElementById("try");
  if (!root || !globalThis.footingChart) return;
  var read = function (id) { return JSON.parse(document.getElementById(id).textContent); };
  var data = read("try-data"), option = read("try-chart");
  var get = function (id) { return document.getElementById("try-" + id); };
  var put = function (id, text) { var e = get(id); if (e) e.textContent = text; };

  // Numbers as the report writes them.
  var group = function (n) { return String(n).replace(/\B(?=(\d{3})+(?!\d))/g, "\u202f"); };
  var minus = function (s) { return s.replace("-", "\u2212"); };
  var shown = function (x) {
    var v = data.transform === "exp" ? Math.exp(x) : data.transform === "tanh" ? Math.tanh(x) : x;
    var s = v.toFixed(2);
    return minus(s === "-0.00" ? "0.00" : s);
  };
  var percent = function (x) {
    if (x == null) return "\u2013";
    var s = (100 * x).toFixed(0);
    if (x > 0 && s === "0") return "< 1%";
    if (x < 1 && s === "100") return "> 99%";
    return s + "%";
  };

  // Reading between the computed points: straight in the effect and in the square root of n.
  var place = function (list, x, by) {
    var i = 1;
    while (i < list.length - 1 && list[i] < x) i++;
    var a = by(list[i - 1]), b = by(list[i]);
    var t = (by(x) - a) / (b - a);
    return { i: i - 1, t: Math.min(1, Math.max(0, t)) };
  };
  var same = function (x) { return x; };
  var mix = function (row, at) { return row[at.i] * (1 - at.t) + row[at.i + 1] * at.t; };
  var layer = function (alpha, allocation) {
    for (var i = 0; i < data.layers.length; i++) {
      if (data.layers[i].alpha === alpha && data.layers[i].allocation === allocation) return data.layers[i];
    }
    return null;
  };
  var rowAt = function (l, effect) {
    var at = place(data.effects, effect, same);
    var a = l.power[at.i], b = l.power[at.i + 1];
    return data.ns.map(function (_, j) { return a[j] * (1 - at.t) + b[j] * at.t; });
  };
  var atN = function (row, n) { return row && row.length ? mix(row, place(data.ns, n, Math.sqrt)) : null; };
  // The least n whose power, read between the points, reaches what is asked; null beyond the grid.
  var needed = function (row, power) {
    if (row[0] >= power) return data.ns[0];
    for (var j = 1; j < row.length; j++) {
      if (row[j] >= power) {
        var t = (power - row[j - 1]) / (row[j] - row[j - 1]);
        var q = Math.sqrt(data.ns[j - 1]) * (1 - t) + Math.sqrt(data.ns[j]) * t;
        return Math.ceil(q * q - 1e-9);
      }
    }
    return null;
  };
  var enrolled = function (n, allocation, dropout) {
    var grow = function (g) { return Math.ceil(g / (1 - dropout) - 1e-9); };
    if (data.groups < 2) return grow(n);
    var parts = allocation.split(":").map(Number);
    if (parts.length < 2 || parts.some(function (x) { return !(x > 0); })) {
      parts = Array.from({ length: data.groups }, function () { return 1; });
    }
    return parts.reduce(function (sum, part) { return sum + grow(Math.ceil(n * part / parts[0] - 1e-9)); }, 0);
  };

  var state = Object.assign({}, data.start);
  var axisMost = option.xAxis[0].max, most = Math.min(axisMost, data.ns[data.ns.length - 1]);
  var range = function (id, lo, hi, step, value) {
    var e = get(id);
    e.min = lo; e.max = hi; e.step = step; e.value = value;
  };
  var effectStep = (data.effects[data.effects.length - 1] - data.effects[0]) / 400;
  var reset = function () {
    state = Object.assign({}, data.start);
    range("effect", data.effects[0], data.effects[data.effects.length - 1], effectStep, state.effect);
    range("n", data.ns[0], most, 1, Math.min(most, state.n));
    range("power", 0.5, 0.95, 0.01, state.power);
    range("dropout", 0, 0.5, 0.01, state.dropout);
    get("alpha").value = state.alpha;
    get("allocation").value = state.allocation;
  };

  var chart = null;
  var css = function (name) { return getComputedStyle(document.documentElement).getPropertyValue("--" + name).trim(); };
  var inks = ["ink", "soft", "faint", "line", "paper", "evidence", "evidence-wash", "plan", "plan-wash"];
  var inked = function (v) {
    if (Array.isArray(v)) return v.map(inked);
    if (v && typeof v === "object") {
      var o = {};
      Object.keys(v).forEach(function (k) { o[k] = k === "color" && inks.indexOf(v[k]) >= 0 ? css(v[k]) : inked(v[k]); });
      return o;
    }
    return v;
  };
  var points = function (row) {
    var list = [];
    if (!row || !row.length) return list;
    for (var i = 0; i <= 60; i++) {
      var n = data.ns[0] + (most - data.ns[0]) * i / 60;
      list.push([n, 100 * atN(row, n)]);
    }
    return list;
  };

  // How far each name at a line's end moves down so that the three stand apart; height is the plot's, in pixels.
  var apart = function (rows, height) {
    var ends = [0, 1, 2].filter(function (i) { return rows[i].length; }).map(function (i) {
      return { i: i, y: (100 - rows[i][rows[i].length - 1][1]) / 100 * height };
    }).sort(function (a, b) { return a.y - b.y || b.i - a.i; });
    var out = [0, 0, 0, 0], floor = -Infinity;
    ends.forEach(function (e) {
      var y = Math.max(e.y, floor);
      out[e.i] = y - e.y;
      floor = y + 15;
    });
    return out;
  };

  var draw = function () {
    var l = layer(state.alpha, state.allocation);
    var base = layer(data.start.alpha, data.start.allocation);
    put("effect-text", shown(state.effect));
    put("n-text", group(state.n));
    put("power-text", percent(state.power));
    put("dropout-text", percent(state.dropout));
    if (!l) {
      ["has", "assures", "needs", "enrols", "costs"].forEach(function (id) { put(id, "\u2013"); });
      put("says", "This pair of significance level and allocation was not computed.");
      return;
    }
    put("says", "");
    var row = rowAt(l, state.effect);
    var power = atN(row, state.n), assurance = atN(l.assurance, state.n), adjusted = atN(l.adjusted, state.n);
    var n = needed(row, state.power);
    var total = n == null ? null : enrolled(n, state.allocation, state.dropout);
    put("has", percent(power));
    put("assures", percent(assurance) + (adjusted == null ? "" : " (" + percent(adjusted) + " allowing for missing studies)"));
    put("needs", n == null ? "more than was computed, or no size" : group(n));
    put("enrols", total == null ? "\u2013" : group(total));
    if (total != null && data.perParticipant > 0) {
      var cost = Math.round(data.fixed + data.perParticipant * total);
      put("costs", (data.currency.length === 1 ? data.currency : "") + group(cost) + (data.currency.length > 1 ? " " + data.currency : "") + (data.atMost != null && cost > data.atMost ? ", over the limit" : ""));
    } else {
      put("costs", "\u2013");
    }
    // Where nothing has been moved the plan speaks for itself, to the last digit.
    if (Object.keys(state).every(function (k) { return state[k] === data.start[k]; })) {
      put("has", data.plan.power);
      put("needs", data.plan.needs);
      put("enrols", data.plan.enrols);
      put("costs", data.plan.costs);
    }
    var o = inked(option);
    o.textStyle = { fontFamily: getComputedStyle(root).fontFamily };
    o.xAxis[0].nameTextStyle = { color: css("soft"), align: "right", verticalAlign: "top", padding: [26, 0, 0, 0] };
    o.xAxis[0].nameGap = 0;
    var small = root.clientWidth < 600;
    o.grid = [{ left: 44, right: small ? 16 : 110, top: 24, bottom: 48 }];
    var rows = [points(base && rowAt(base, data.start.effect)), points(row), points(l.assurance), [[0, 100 * state.power], [axisMost, 100 * state.power]]];
    var shift = apart(rows, 252);
    o.series.forEach(function (s, i) {
      s.data = rows[i];
      s.silent = true;
      s.emphasis = { disabled: true };
      s.endLabel = { show: !small && i < 3 && rows[i].length > 0, formatter: "{a}", color: s.lineStyle.color, distance: 8, fontSize: 12, offset: [0, shift[i]] };
    });
    o.series[1].markLine = {
      silent: true, symbol: "none", animation: false,
      lineStyle: { color: css("plan"), type: "dashed", width: 1.2 },
      label: { formatter: group(state.n) + ": " + percent(power), color: css("plan"), fontWeight: 600, position: "insideEndTop", rotate: 0, align: "left", padding: [0, 0, 0, 6] },
      data: [{ xAxis: state.n }]
    };
    if (!chart) chart = globalThis.footingChart.init(get("chart-place"), null, { renderer: "svg", width: root.clientWidth, height: 300 });
    chart.setOption(o, true);
    get("chart-place").setAttribute("aria-label", "Power by size for an effect of " + shown(state.effect) + ": " + percent(power) + " with " + group(state.n) + ".");
  };

  root.hidden = false;
  reset();
  draw();
  ["effect", "n", "power", "dropout"].forEach(function (id) {
    get(id).addEventListener("input", function () { state[id] = Number(get(id).value); draw(); });
  });
  ["alpha", "allocation"].forEach(function (id) {
    get(id).addEventListener("change", function () { state[id] = get(id).value; draw(); });
  });
  get("reset").addEventListener("click", function () { reset(); draw(); });
  globalThis.addEventListener("resize", function () { if (chart) { chart.resize({ width: root.clientWidth, height: 300 }); draw(); } });
  matchMedia("(prefers-color-scheme: dark)").addEventListener("change", draw);
})();
