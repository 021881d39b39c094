// Stub.
export async function runScoringLoop(_options: { signal: AbortSignal }): Promise<void> {}
