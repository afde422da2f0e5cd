import { invitationInput, type InvitationInput } from '#shared/schemas/access.ts';
import { roleNames, roles, type Role } from '#shared/permissions.ts';
import type { PeopleView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { FormLink, optionsOf } from './site-parts.tsx';

function InviteForm({
  laboratories,
  onDone,
}: {
  laboratories: PeopleView['laboratories'];
  onDone: () => void;
}) {
  const { site } = usePlace();
  const invite = useWrite<InvitationInput>(site.id, '/people');
  return (
    <RecordForm<InvitationInput>
      schema={invitationInput}
      defaults={{ id: newId(), email: '', displayName: '' }}
      submitLabel="Send the invitation"
      onSubmit={(values) => invite.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="displayName" label="Name" autoComplete="off" />
      <TextField name="email" label="E-mail address" inputMode="email" />
      <ChoiceField
        name="role"
        label="Role at this site"
        options={roles.map((role) => ({ value: role, label: roleNames[role] }))}
      />
      <ChoiceField
        name="laboratoryId"
        label="Laboratory"
        hint="Only for the laboratory role."
        options={optionsOf(laboratories)}
        isOptional
      />
    </RecordForm>
  );
}

function EndRole({ id, name }: { id: string; name: string }) {
  const { site } = usePlace();
  const end = useWrite<Record<string, never>>(site.id, `/people/${id}/end`);
  return (
    <>
      <FormLink label="End the role" title={`End the role of ${name}`}>
        {(onDone) => (
          <div className="grid gap-4">
            <p>
              {name} is signed out at once and cannot come back in this role. What they recorded stays under
              their name.
            </p>
            {end.error && (
              <p role="alert" className="error-text">
                ⚠ {end.error.document.detail}
              </p>
            )}
            <p>
              <button type="button" className="btn" onClick={() => end.mutate({}, { onSuccess: onDone })}>
                End the role
              </button>
            </p>
          </div>
        )}
      </FormLink>
    </>
  );
}

/** People with a role at the site; the administrator invites and ends roles. */
export function PeopleSection() {
  const { site, me, can } = usePlace();
  const query = useRecord<PeopleView>(site.id, '/people');
  return (
    <Viewed query={query}>
      {(view) => (
        <Section
          title="People"
          id="people"
          aside={
            can('manage:people') && (
              <FormLink label="Invite a person">
                {(onDone) => <InviteForm laboratories={view.laboratories} onDone={onDone} />}
              </FormLink>
            )
          }
        >
          <ScrollBox label="People">
            <table className="tbl tbl-tight">
              <caption className="sr-only">People with a role at the site</caption>
              <thead>
                <tr>
                  <th scope="col">Name</th>
                  <th scope="col">E-mail</th>
                  <th scope="col">Role</th>
                  <th scope="col">State</th>
                  <th scope="col">
                    <span className="sr-only">Act</span>
                  </th>
                </tr>
              </thead>
              <tbody>
                {view.people.map((person) => (
                  <tr key={person.membershipId}>
                    <th scope="row">{person.displayName}</th>
                    <td>{person.email}</td>
                    <td>{roleNames[person.role as Role]}</td>
                    <td>{person.hasPassword ? 'has a password' : 'no password yet'}</td>
                    <td>
                      {can('manage:people') && person.personId !== me.personId && (
                        <EndRole
                          id={person.membershipId}
                          name={`${person.displayName}, ${roleNames[person.role as Role]}`}
                        />
                      )}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </ScrollBox>
        </Section>
      )}
    </Viewed>
  );
}
