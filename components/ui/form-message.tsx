import { Notice } from "@/components/ui/notice";

interface FormMessageProps {
  readonly state: { readonly status: "idle" | "done" | "refused"; readonly message: string | null };
}

/** What became of a form as a whole, read out when it appears. */
export function FormMessage({ state }: FormMessageProps) {
  if (state.status === "idle") return null;
  if (state.status === "done") return state.message && <Notice live="status" title={state.message} />;
  return <Notice tone="madder" live="alert" title={state.message ?? "Something in this form is not right yet."} />;
}
