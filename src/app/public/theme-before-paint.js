/* Sets the chosen theme before the first paint; a file of its own because inline scripts are forbidden by the security policy. */
(function () {
  var chosen = null;
  try {
    chosen = localStorage.getItem('pennyweight.theme');
  } catch (refused) {
    chosen = null; // storage can be switched off: then the system decides
  }
  var dark = chosen === 'dark' || (chosen !== 'light' && matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.dataset.theme = dark ? 'dark' : 'light';
})();
