import { onScopeDispose, ref, watch, type Ref } from 'vue'

const BELOW_TOP_PX = 120

/** Which of the headings was passed last while scrolling: the section that one reads. */
export function useSectionInView(ids: () => readonly string[]): Ref<string | null> {
  const inView = ref<string | null>(null)
  let frame = 0

  const look = () => {
    frame = 0
    const passed = ids().filter((id) => {
      const top = document.getElementById(id)?.getBoundingClientRect().top
      return top !== undefined && top <= BELOW_TOP_PX
    })
    const isAtEnd = window.scrollY > 0 && innerHeight + scrollY >= document.documentElement.scrollHeight - 2
    inView.value = (isAtEnd ? ids().at(-1) : passed.at(-1)) ?? ids()[0] ?? null
  }
  const lookSoon = () => (frame ||= requestAnimationFrame(look))

  watch(ids, lookSoon, { immediate: true, flush: 'post' })
  window.addEventListener('scroll', lookSoon, { passive: true })
  onScopeDispose(() => (cancelAnimationFrame(frame), window.removeEventListener('scroll', lookSoon)))
  return inView
}
