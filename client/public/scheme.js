// Runs before the first paint, so that a dark page never flashes light. A file of its own: the content security policy allows no inline script.
(function () {
  var kept = null;
  try {
    kept = localStorage.getItem('foreveil-scheme');
  } catch {
    // storage is blocked: follow the system
  }
  var dark = kept === 'dark' || (kept !== 'light' && matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.setAttribute('data-mantine-color-scheme', dark ? 'dark' : 'light');
})();
