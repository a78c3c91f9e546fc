import { Letter, Paragraph, SmallPrint } from '../../accounts/emails/letter';

interface Props {
  organization: string;
  invitedBy: string;
  /** 'Director of Larkwater'. */
  role: string;
  href: string;
  /** The last day on which it can be accepted, in words. */
  until: string;
}

/** The subject of an invitation. */
export function invitationSubject(organization: string): string {
  return `An invitation to ${organization}`;
}

/** To somebody who is offered a role: who offers what, and the link that answers. */
export function Invitation({ organization, invitedBy, role, href, until }: Props) {
  return (
    <Letter
      preview={`${invitedBy} would like you to join ${organization}.`}
      heading={`Join ${organization}`}
      link={{ label: 'See the invitation', href }}
      after={
        <SmallPrint>
          The link can be used until {until}, by whoever reads mail at this address. If you don’t know {organization}, leave this mail be: nothing
          happens without the link.
        </SmallPrint>
      }
    >
      <Paragraph>
        {invitedBy} invites you to {organization}, an office that runs science tournaments, as: {role}.
      </Paragraph>
      <Paragraph>Open the invitation to accept or decline. If you have no account yet, you make one on the way with this address.</Paragraph>
    </Letter>
  );
}
