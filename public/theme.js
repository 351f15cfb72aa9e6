// Runs before the first paint, so that a remembered choice does not flash.
try {
  const theme = localStorage.getItem('hubtack-theme');
  if (theme === 'day' || theme === 'night') document.documentElement.dataset.theme = theme;
} catch {
  // A browser that keeps nothing follows the system.
}
