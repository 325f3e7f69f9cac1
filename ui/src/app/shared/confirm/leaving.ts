/** Whether to leave what has not been saved. The browser's own question: it also works while the page is being closed. */
export function askBeforeLeaving(): Promise<boolean> {
  return Promise.resolve(confirm('What you typed here is not saved. Leave it?'));
}
