import { Failure } from "@/components/shell/failure";

export default function ForbiddenInProject() {
  return (
    <div className="mx-auto w-full max-w-6xl px-4 sm:px-5">
      <title>Not for your role · Stackyard</title>
      <Failure title="Your role in this project does not reach this page">
        <p>Settings are for its leads. You can look at everything else; to change the project itself, ask a lead.</p>
      </Failure>
    </div>
  );
}
