/**
 * Follows a link to a place on the same page without a navigation: the place comes into view, out of whatever is folded, and takes the focus. To be hung on the
 * document's clicks; every other click goes its way.
 */
export function jumpWithin(event: MouseEvent): void {
  if (event.defaultPrevented || event.button !== 0 || event.metaKey || event.ctrlKey || event.shiftKey || event.altKey) return
  const link = event.target instanceof Element ? event.target.closest('a[href^="#"]') : null
  const place = link && document.getElementById(decodeURIComponent(link.getAttribute('href')!.slice(1)))
  if (!place) return
  event.preventDefault()
  for (let fold = place.closest('details'); fold; fold = fold.parentElement?.closest('details') ?? null) fold.open = true
  if (place.tabIndex < 0 && !place.hasAttribute('tabindex')) place.setAttribute('tabindex', '-1')
  place.focus({ preventScroll: true })
  const isField = place.matches('input, select, textarea')
  place.scrollIntoView({ block: isField ? 'center' : 'start' })
}
