// Every address that leads nowhere.
import { notFound } from "~/services/request.server";

export function loader() {
  throw notFound();
}

export function action() {
  throw notFound();
}

export default function NotFound() {
  return null;
}
