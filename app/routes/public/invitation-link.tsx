// Stub.
export const loader = () => new Response("stub");
