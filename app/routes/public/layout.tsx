import { Outlet } from "react-router";
import { Header } from "~/components/ui/header";

export default function PublicLayout() {
  return (
    <>
      <Header />
      <main id="main" className="px-4 py-8 md:px-6">
        <Outlet />
      </main>
    </>
  );
}
