import { watchEffect } from "vue";

/** The document's title follows the page's headline. */
export function useTitle(headline: () => string | undefined): void {
  watchEffect(() => {
    const text = headline();
    document.title = text === undefined || text === "" ? "Clinograph" : `${text.replace(/\.$/, "")} - Clinograph`;
  });
}
