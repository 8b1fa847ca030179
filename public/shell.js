// Runs before the first paint: puts the chosen theme on the root. Later: the "Day or night" switch and print buttons.
(function () {
  var root = document.documentElement;
  var key = 'counterlag-theme';
  root.dataset.script = 'on';
  try {
    var chosen = localStorage.getItem(key);
    if (chosen === 'light' || chosen === 'dark') root.dataset.theme = chosen;
  } catch {
    // Storage is refused: the system's own preference holds.
  }
  document.addEventListener('click', function (event) {
    var target = event.target instanceof Element ? event.target : null;
    if (!target) return;
    if (target.closest('[data-print]')) window.print();
    if (!target.closest('[data-theme-switch]')) return;
    var dark = root.dataset.theme
      ? root.dataset.theme === 'dark'
      : window.matchMedia('(prefers-color-scheme: dark)').matches;
    root.dataset.theme = dark ? 'light' : 'dark';
    try {
      localStorage.setItem(key, root.dataset.theme);
    } catch {
      // The choice holds for this page only.
    }
  });
})();
