/** Over plain http on another host browsers give pages no clipboard: then a text is selected, to be copied by hand. */
export async function copy(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return false;
  }
}

export function select(element: Element): void {
  getSelection()?.selectAllChildren(element);
}
