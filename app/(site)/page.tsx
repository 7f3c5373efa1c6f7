import { Front } from "@/components/site/front";

export default function FrontPage() {
  return <Front />;
}
