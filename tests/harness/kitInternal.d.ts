/** The one function of the framework's inside that the request harness needs; its package gives no types for it. */
declare module '@sveltejs/kit/internal/server' {
  export function with_request_store<T>(store: unknown, fn: () => T): T;
}
