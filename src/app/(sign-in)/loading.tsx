import { Loading } from "@/ui/primitives/states";

export default function SignInLoading() {
  return <Loading title="Opening the sign-in" />;
}
