// Stub.
export async function runClosingLoop(_options: { signal: AbortSignal }): Promise<void> {}
