import { Select } from '@/app/ui/form/Select';
import { ROLES, type Role } from '@/openapi/scopes';
import { ROLE_WORDS } from './person';

export function RoleSelect({ role }: { role?: Role }) {
  return (
    <Select label="Role" name="role" defaultValue={role ?? 'surveyor'}>
      {ROLES.map((name) => (
        <option key={name} value={name}>
          {name}: {ROLE_WORDS[name]}
        </option>
      ))}
    </Select>
  );
}
