import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";

export default function NoSuchInvitation() {
  return (
    <>
      <SiteHeader />
      <Sheet title="There is no such invitation" says="The address is not complete, or was never sent. Copy the whole link from the mail and open it again." />
    </>
  );
}
