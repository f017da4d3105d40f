import { listPeople } from "~/models/labs.server";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/people";

export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  return { people: await listPeople(lab.id) };
}

export const meta: Route.MetaFunction = () => [{ title: "People · Demilune" }];

export default function People({ loaderData: { people } }: Route.ComponentProps) {
  return (
    <>
      <h1 className="font-semibold text-title">People</h1>
      <div className="mt-3 max-w-3xl overflow-x-auto">
        <table className="table">
          <thead>
            <tr>
              <th scope="col">Name</th>
              <th scope="col">Address</th>
              <th scope="col">Role</th>
            </tr>
          </thead>
          <tbody>
            {people.map((person) => (
              <tr key={person.id}>
                <td className="font-semibold">{person.name}</td>
                <td>{person.email}</td>
                <td>{person.role}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  );
}
