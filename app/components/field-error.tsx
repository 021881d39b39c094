// The sentence under a control that was refused.
import { VerdictMark } from "./verdict-mark";

export function FieldError({ id, children }: { id: string; children: string | undefined }) {
  if (!children) return null;
  return (
    <p id={id} className="mt-1 flex items-start gap-2 text-13 text-fail">
      <span className="flex h-5 items-center">
        <VerdictMark verdict="fail" silent />
      </span>
      {children}
    </p>
  );
}
