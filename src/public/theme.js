/* global window, document */
// Sets the chosen theme before the first paint; a file of its own since the content security policy allows no inline script.
(function () {
  function kept() {
    try {
      return window.localStorage.getItem('pennyweight-theme');
    } catch {
      return null; // storage switched off: the system decides
    }
  }
  var chosen = kept();
  var dark = chosen === 'dark' || (chosen !== 'light' && window.matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.dataset.theme = dark ? 'dark' : 'light';
})();
