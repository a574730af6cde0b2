// Sets the chosen theme before the first paint; src/stores/settings.ts writes the key.
try {
  const { theme } = JSON.parse(localStorage.getItem('poleshelf.settings') ?? '{}')
  if (theme === 'light' || theme === 'dark') document.documentElement.dataset.theme = theme
} catch {
  // Without storage the system decides.
}
