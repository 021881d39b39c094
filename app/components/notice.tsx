// A sentence that stands beside the work: a bar at its left tells its tone.
import type { ReactNode } from "react";

export type NoticeTone = "near" | "fail" | "signal" | "edge";

const bars: Record<NoticeTone, string> = {
  near: "border-near",
  fail: "border-fail",
  signal: "border-signal",
  edge: "border-edge",
};

interface NoticeProps {
  tone?: NoticeTone;
  /** "status" for what appears after an action, "alert" for what must interrupt. */
  role?: "status" | "alert";
  className?: string;
  children: ReactNode;
}

export function Notice({ tone = "edge", role, className = "", children }: NoticeProps) {
  return (
    <div role={role} className={`border-l-3 py-0.5 pl-3.5 text-13 ${bars[tone]} ${className}`}>
      {children}
    </div>
  );
}
