declare const sanitized: unique symbol

/**
 * HTML that has been through the sanitizer. Only the function that sanitizes may make one (by a cast, once);
 * `components/prose.tsx` takes nothing else.
 */
export type SafeHtml = string & { readonly [sanitized]: true }
