import { Letter, Paragraph, SmallPrint } from './letter';

export const RESET_SUBJECT = 'Choose a new password';

/** To somebody who asked for a new password: the link that lets them choose one. */
export function ResetPassword({ name, href, minutes }: { name: string; href: string; minutes: number }) {
  return (
    <Letter
      preview="The link to choose a new password."
      heading="Choose a new password"
      name={name}
      link={{ label: 'Choose a new password', href }}
      after={
        <SmallPrint>
          The link works once, for {minutes} minutes. If you did not ask for it, leave this mail be: your password stays as it is.
        </SmallPrint>
      }
    >
      <Paragraph>Somebody, most likely you, asked for a new password for this account. When you have chosen one, you are signed out everywhere else.</Paragraph>
    </Letter>
  );
}
