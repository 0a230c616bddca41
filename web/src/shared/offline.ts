/** Keeps the page's own files for use without a network, where the engine allows it. */
export function installOffline(): void {
  if (!import.meta.env.PROD || !isSecureContext || !location.protocol.startsWith('http')) return;
  if (!('serviceWorker' in navigator)) return;
  // Offline use is a comfort: the page works without.
  navigator.serviceWorker.register('./offline.js').catch(() => undefined);
}
