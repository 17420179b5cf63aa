"use strict";
(function () {
  const form = document.getElementById("filters");
  const box = document.getElementById("filter");
  const found = document.getElementById("found");
  const choices = Array.from(form.querySelectorAll("select"));
  const items = Array.from(document.querySelectorAll(".item"));
  const days = Array.from(document.querySelectorAll(".day"));
  let texts = null;

  function fits(item, at, words, chosen) {
    for (const [name, value] of chosen) {
      const has = item.dataset[name];
      if (has !== undefined && !has.split("|").includes(value)) return false;
    }
    return words.every((word) => texts[at].includes(word));
  }

  function show() {
    if (texts === null) texts = items.map((item) => item.textContent.toLowerCase());
    const words = box.value.toLowerCase().split(/\s+/).filter(Boolean);
    const chosen = choices.filter((choice) => choice.value).map((choice) => [choice.name, choice.value]);
    const any = words.length > 0 || chosen.length > 0;
    let count = 0;
    items.forEach((item, at) => {
      const hide = any && !fits(item, at, words, chosen);
      if (item.hidden !== hide) item.hidden = hide;
      if (!hide) count += 1;
    });
    for (const day of days) day.hidden = any && !day.querySelector(".item:not([hidden])");
    found.textContent = any ? count + " of " + items.length + " entries shown" : "";
  }

  function reveal() {
    let name = "";
    try { name = decodeURIComponent(location.hash.slice(1)); } catch (e) { return; }
    const place = name && document.getElementById(name);
    if (!place || !place.closest("[hidden]")) return;
    all();
    place.scrollIntoView();
  }

  function all() {
    box.value = "";
    for (const choice of choices) choice.value = "";
    show();
  }

  function draw(event) {
    const scheme = event.target;
    if (!scheme.open || scheme.dataset.drawn) return;
    scheme.dataset.drawn = "1";
    for (const link of scheme.querySelectorAll("a")) {
      const card = document.getElementById(link.hash.slice(1));
      const cross = card && card.querySelector(".cross");
      if (cross) link.parentElement.after(cross.cloneNode(true));
    }
  }

  form.hidden = false;
  form.addEventListener("input", show);
  document.getElementById("all").addEventListener("click", all);
  addEventListener("hashchange", reveal);
  for (const scheme of document.querySelectorAll(".scheme")) scheme.addEventListener("toggle", draw);
})();
