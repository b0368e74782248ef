import type { PersonView } from "@/domain/people";
import { RuledTable, Th } from "@/ui/primitives/table";
import type { PeopleActions } from "./people-actions";
import { PersonRow } from "./person-row";

export function PeopleTable({ people, actions }: { people: PersonView[]; actions: PeopleActions }) {
  return (
    <RuledTable caption="People with an account" className="min-w-[52rem]">
      <thead>
        <tr>
          <Th>name</Th>
          <Th>e-mail</Th>
          <Th>role</Th>
          <Th>state</Th>
          <Th>
            <span className="sr-only">what can be done</span>
          </Th>
        </tr>
      </thead>
      <tbody>
        {people.map((person) => (
          // A changed role makes the row anew, so that its choice follows what is stored.
          <PersonRow key={`${person.userId}:${person.role}`} person={person} actions={actions} />
        ))}
      </tbody>
    </RuledTable>
  );
}
