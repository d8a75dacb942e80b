import type { Page } from 'playwright-core';

/** Lets files go over an element of the page, as a person does. */
export async function dropFiles(page: Page, selector: string, files: Record<string, Buffer>): Promise<void> {
  const encoded = Object.entries(files).map(([name, bytes]) => ({ name, base64: bytes.toString('base64') }));
  const dataTransfer = await page.evaluateHandle((given) => {
    const transfer = new DataTransfer();
    for (const { name, base64 } of given) {
      const bytes = Uint8Array.from(atob(base64), (character) => character.charCodeAt(0));
      transfer.items.add(new File([bytes], name, { type: 'text/csv' }));
    }
    return transfer;
  }, encoded);
  for (const type of ['dragenter', 'dragover', 'drop'])
    await page.dispatchEvent(selector, type, { dataTransfer });
}

/** Without the browser's own line about a 401: a wrong password is answered so. */
export const unexpected = (complaints: string[]): string[] =>
  complaints.filter((text) => !text.includes('the server responded with a status of 401'));
