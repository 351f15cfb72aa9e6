import { moment } from '@/app/ui/numbers';
import { Once } from '@/app/ui/Once';

/** The link with which a person sets a password. */
export function InvitationLink({
  invitation,
  close,
}: {
  invitation: { path: string; expiresAt: string };
  close: () => void;
}) {
  return (
    <Once
      secret={`${window.location.origin}${invitation.path}`}
      what="the link"
      note={`Hand it over yourself; the hub sends no mail. It works once, until ${moment(invitation.expiresAt)}.`}
      close={close}
    />
  );
}
