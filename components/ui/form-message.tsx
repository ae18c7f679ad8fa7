import { Notice } from "@/components/ui/notice";

interface FormMessageProps {
  readonly state: {
    readonly status: "idle" | "done" | "refused";
    readonly message: string | null;
    readonly fields: Readonly<Record<string, string>>;
  };
}

/** What became of a form, read out when it appears. What is wrong with single fields is seen beside them. */
export function FormMessage({ state }: FormMessageProps) {
  const { status, message, fields } = state;
  if (status === "done") return message && <Notice live="status" title={message} />;
  if (message !== null) return <Notice tone="madder" live="alert" title={message} />;
  const complaints = Object.values(fields);
  if (complaints.length === 0) return null;
  return (
    <p role="alert" className="sr-only">
      {complaints.join(" ")}
    </p>
  );
}
