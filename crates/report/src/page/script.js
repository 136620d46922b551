// Sorting and filtering of tables; everything is there without it.
document.querySelectorAll("table[data-tools]").forEach(function (table) {
  var body = table.tBodies[0], rows = Array.from(body.rows), box = table.closest(".box");
  function value(row, column) {
    var cell = row.cells[column], given = cell.getAttribute("data-v");
    return given === null ? cell.textContent.trim().toLowerCase() : Number(given);
  }
  Array.from(table.tHead.rows[0].cells).forEach(function (head, column) {
    var button = document.createElement("button");
    button.type = "button";
    button.textContent = "↕";
    button.setAttribute("aria-label", "sort by " + head.textContent.trim());
    head.append(button);
    head.addEventListener("click", function () {
      var now = head.getAttribute("aria-sort");
      // numbers begin with the greatest, words with the first
      var first = head.classList.contains("num") ? "descending" : "ascending";
      var other = first === "ascending" ? "descending" : "ascending";
      var order = now === first ? other : first, sign = order === "ascending" ? 1 : -1;
      table.querySelectorAll("th[aria-sort]").forEach(function (th) {
        th.removeAttribute("aria-sort");
        th.querySelector("button").textContent = "↕";
      });
      head.setAttribute("aria-sort", order);
      button.textContent = order === "ascending" ? "↑" : "↓";
      rows.sort(function (a, b) {
        var x = value(a, column), y = value(b, column);
        return sign * (typeof x === "string" && typeof y === "string" ? x.localeCompare(y, "en", { numeric: true }) : x < y ? -1 : x > y ? 1 : 0);
      });
      body.append.apply(body, rows);
    });
  });
  var tools = document.createElement("div"), label = document.createElement("label");
  var input = document.createElement("input"), output = document.createElement("output");
  tools.className = "tools";
  label.append("Only rows with ", input);
  input.type = "search";
  input.placeholder = "words, e.g. a name";
  tools.append(label, output);
  box.before(tools);
  function filter() {
    var words = input.value.toLowerCase().split(/\s+/).filter(Boolean), shown = 0;
    rows.forEach(function (row) {
      var text = row.textContent.toLowerCase();
      row.hidden = !words.every(function (word) { return text.includes(word); });
      if (!row.hidden) shown += 1;
    });
    output.textContent = words.length ? shown + " of " + rows.length + " rows" : rows.length + " rows";
  }
  input.addEventListener("input", filter);
  filter();
});
