/**
 * Puts the text of a table on the clipboard and says so. Over plain http on a workshop network the clipboard is closed to pages: then the table is
 * selected, ready for the hand.
 */
export function useCopyTable() {
  const { show } = useToasts()

  return async function copyTable(text: string, table: HTMLElement | null) {
    try {
      await navigator.clipboard.writeText(text)
      show('The table is copied, with every digit.')
    } catch {
      if (table) window.getSelection()?.selectAllChildren(table)
      show('The clipboard is closed to this page. The table is selected: press Ctrl+C to copy it as shown.')
    }
  }
}
