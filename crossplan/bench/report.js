"use strict";
(function () {
  const box = document.getElementById("filter");
  const found = document.getElementById("found");
  const items = Array.from(document.querySelectorAll(".item"));
  const texts = items.map((item) => item.textContent.toLowerCase());
  const days = Array.from(document.querySelectorAll("h3.day"));
  function show() {
    const words = box.value.toLowerCase().split(/\s+/).filter(Boolean);
    let count = 0;
    items.forEach((item, at) => {
      item.hidden = !words.every((word) => texts[at].includes(word));
      if (!item.hidden) count += 1;
    });
    days.forEach((day) => {
      day.hidden = !day.nextElementSibling.querySelector(".item:not([hidden])");
    });
    found.textContent = words.length ? count + " of " + items.length + " shown" : "";
  }
  box.parentElement.hidden = false;
  box.addEventListener("input", show);
})();
