import { Letter, Paragraph, SmallPrint } from './letter';

export const VERIFY_SUBJECT = 'Confirm your e-mail address';

/** To somebody who signed up: the link that confirms the address. */
export function VerifyAddress({ name, href, hours }: { name: string; href: string; hours: number }) {
  return (
    <Letter
      preview="One click, and your account is ready."
      heading="Confirm your e-mail address"
      name={name}
      link={{ label: 'Confirm my address', href }}
      after={
        <SmallPrint>
          The link works once, for {hours} hours. If you did not sign up, leave this mail be: without the link nothing happens, and the address is
          forgotten.
        </SmallPrint>
      }
    >
      <Paragraph>You signed up with this address. Confirm that it is yours, and your account is ready.</Paragraph>
    </Letter>
  );
}
