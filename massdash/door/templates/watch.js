// The page itself says nothing when its kernel or the program ends; this asks every two seconds and tells.
(() => {
  const every = 2000;
  const page = JSON.parse(document.getElementById("jupyter-config-data").textContent);
  const banner = document.getElementById("door-lost");
  let misses = 0;

  function tell(sentence) {
    banner.querySelector("span").textContent = sentence;
    banner.hidden = false;
  }

  async function ask() {
    try {
      const answer = await fetch(`${page.baseUrl}door/pulse/${page.kernelId}`, { cache: "no-store" });
      misses = 0;
      if (answer.ok) banner.hidden = true;
      else return tell("Connection lost: the computation behind this page has ended. Reload to start it again.");
    } catch {
      // One missed answer can be a computer waking up.
      if (++misses > 1) tell("Connection lost: the program that serves this page has ended. Start it again, then reload.");
    }
    setTimeout(ask, every);
  }

  banner.querySelector("button").addEventListener("click", () => location.reload());
  setTimeout(ask, every);
})();
