/** All words of an element in their order, one space between, however they are spread over its children. */
export function wordsOf(element: Element): string {
  const walker = document.createTreeWalker(element, NodeFilter.SHOW_TEXT)
  const words: string[] = []
  while (walker.nextNode()) words.push(walker.currentNode.textContent ?? '')
  return words.join(' ').replaceAll(/\s+/g, ' ').trim()
}
