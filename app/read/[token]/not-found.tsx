import { Sheet } from "@/app/_site/Sheet";
import { SiteHeader } from "@/app/_site/SiteHeader";

export default function NoSuchLink() {
  return (
    <>
      <SiteHeader />
      <Sheet
        title="There is no such reading link"
        says="The address is not complete, or was never handed out. Copy the whole link from where you got it and open it again."
      />
    </>
  );
}
