(() => {
  let choice = 'system';
  try {
    choice = localStorage.getItem('longpatch.theme') ?? 'system';
  } catch {
    // Storage may be switched off; the system's theme is then right.
  }
  const dark =
    choice === 'slate' || (choice !== 'paper' && matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.dataset.theme = dark ? 'slate' : 'paper';
})();
