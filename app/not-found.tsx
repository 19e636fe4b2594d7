import Link from "next/link";
import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";

export default function NotFound() {
  return (
    <>
      <SiteHeader />
      <Sheet
        title="There is nothing here for you"
        says="Either this address is wrong, or what stands here belongs to a group you are not in. Check the address, or ask the person who sent you here to invite you."
      >
        <Link href="/">Go to the start</Link>
      </Sheet>
    </>
  );
}
