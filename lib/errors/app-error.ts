/** Expected failures, each with the HTTP status it answers. The message is shown to people: plain words, what to do next. */
const STATUS = {
  unauthenticated: 401,
  forbidden: 403,
  cross_site: 403,
  not_found: 404,
  conflict: 409,
  gone: 410,
  precondition_failed: 412,
  too_large: 413,
  unsupported_media_type: 415,
  invalid: 400,
  too_many_attempts: 429,
  not_supported: 501,
  storage_full: 507,
} as const;

export type ErrorCode = keyof typeof STATUS;

export interface FieldError {
  readonly field: string;
  readonly message: string;
}

export class AppError extends Error {
  readonly fields: readonly FieldError[];
  /** Further members of the problem body (RFC 9457, extension members). */
  readonly extra: Readonly<Record<string, unknown>>;

  constructor(
    readonly code: ErrorCode,
    message: string,
    options: { cause?: unknown; fields?: readonly FieldError[]; extra?: Readonly<Record<string, unknown>> } = {},
  ) {
    super(message, { cause: options.cause });
    this.name = "AppError";
    this.fields = options.fields ?? [];
    this.extra = options.extra ?? {};
  }

  get status(): number {
    return STATUS[this.code];
  }
}
