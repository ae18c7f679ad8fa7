import { Failure } from "@/components/shell/failure";

export default function NotFoundInProject() {
  return (
    <div className="mx-auto w-full max-w-6xl px-4 sm:px-5">
      <Failure title="This project has nothing at this address">
        <p>It may be mistyped, or what was here is gone. Use the job ticket above to find the way.</p>
      </Failure>
    </div>
  );
}
