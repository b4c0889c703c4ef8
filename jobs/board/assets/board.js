// Keeps the page as the queue is: every two seconds it is asked for again, and
// only what differs is changed, so that focus, selection and pictures stay.
"use strict";
(() => {
  const every = 2000, patience = 10000;
  const board = document.getElementById("board"), lost = document.getElementById("lost");
  let last = new Date(), busy = false;

  // picture puts a new picture in an old one's place once it can be drawn.
  function picture(old, now) {
    if (old.getAttribute("src") === now.getAttribute("src")) {
      attributes(old, now);
      return;
    }
    const next = document.importNode(now, true);
    next.removeAttribute("loading");
    next.decode().then(() => old.replaceWith(next), () => {});
  }

  function attributes(old, now) {
    for (const a of [...old.attributes]) if (!now.hasAttribute(a.name)) old.removeAttribute(a.name);
    for (const a of now.attributes) if (old.getAttribute(a.name) !== a.value) old.setAttribute(a.name, a.value);
  }

  const alike = (a, b) => a && a.nodeType === b.nodeType && a.nodeName === b.nodeName && (a.id || "") === (b.id || "");

  // match makes old, an element of this page, like now.
  function match(old, now) {
    if (old.nodeName === "IMG") return picture(old, now);
    attributes(old, now);
    let at = old.firstChild;
    for (const child of [...now.childNodes]) {
      let twin = alike(at, child) ? at : null;
      if (!twin && child.id) twin = [...old.children].find((c) => alike(c, child));
      if (!twin) {
        old.insertBefore(document.importNode(child, true), at);
        continue;
      }
      if (twin !== at) old.insertBefore(twin, at);
      else at = at.nextSibling;
      if (twin.nodeType === Node.ELEMENT_NODE) match(twin, child);
      else if (twin.nodeValue !== child.nodeValue) twin.nodeValue = child.nodeValue;
    }
    while (at) {
      const next = at.nextSibling;
      at.remove();
      at = next;
    }
  }

  function say(text) {
    if (lost.textContent !== text) lost.textContent = text;
    lost.hidden = !text;
  }

  async function look() {
    if (busy || document.hidden) return;
    busy = true;
    try {
      const answer = await fetch(location.href, { cache: "no-store", signal: AbortSignal.timeout(patience) });
      if (answer.status === 401) {
        say("The board has another token now: open the address that it printed last.");
      } else if (answer.status === 404) {
        say("This print is no longer on the list.");
      } else if (!answer.ok) {
        say("The queue cannot be read just now. The page is as it was at " + last.toLocaleTimeString() + ".");
      } else {
        const now = new DOMParser().parseFromString(await answer.text(), "text/html");
        document.title = now.title;
        match(board, now.getElementById("board"));
        last = new Date();
        say("");
      }
    } catch {
      say("The board does not answer. The page is as it was at " + last.toLocaleTimeString() + ".");
    } finally {
      busy = false;
    }
  }

  setInterval(look, every);
  document.addEventListener("visibilitychange", look);
})();
