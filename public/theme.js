// Runs before anything is painted, so that a dark phone never shows a white page while the program loads.
;(function () {
  var root = document.documentElement
  var stored
  try {
    stored = JSON.parse(localStorage.getItem('brimline.settings') || '{}') || {}
  } catch {
    stored = {}
  }
  var dark =
    stored.theme === 'dark' ||
    (stored.theme !== 'light' &&
      Boolean(window.matchMedia) &&
      window.matchMedia('(prefers-color-scheme: dark)').matches)
  root.dataset.theme = dark ? 'dark' : 'light'
  if (stored.leftHand) root.dataset.hand = 'left'
  if (stored.largeKeys) root.dataset.keys = 'large'
  var meta = document.querySelector('meta[name="theme-color"]')
  if (meta) meta.setAttribute('content', dark ? '#0D151A' : '#F3F6F5')
})()
