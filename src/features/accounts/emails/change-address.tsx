import { Letter, Paragraph, SmallPrint } from './letter';

export const CHANGE_SUBJECT = 'Confirm your new e-mail address';
export const CHANGE_TOLD_SUBJECT = 'Your e-mail address is about to change';

/** To the new address of an account: the link that confirms it. */
export function ChangeAddress({ name, href, hours }: { name: string; href: string; hours: number }) {
  return (
    <Letter
      preview="One click, and this becomes your address."
      heading="Confirm your new e-mail address"
      name={name}
      link={{ label: 'Use this address', href }}
      after={<SmallPrint>The link works once, for {hours} hours. If you did not ask for this, leave this mail be: nothing changes without the link.</SmallPrint>}
    >
      <Paragraph>You asked to use this address for your account from now on. It changes when you open the link.</Paragraph>
    </Letter>
  );
}

/** To the address an account has had until now, before the change. */
export function ChangeAddressTold({ name, reset }: { name: string; reset: string }) {
  return (
    <Letter
      preview="Somebody who knows your password asked for another e-mail address."
      heading="Your e-mail address is about to change"
      name={name}
      link={{ label: 'It was not me: choose a new password', href: reset }}
    >
      <Paragraph>
        Somebody who is signed in as you and knows your password asked to use another e-mail address for your account. It changes when the link in
        the mail to the new address is opened.
      </Paragraph>
      <Paragraph>If that was you, there is nothing to do. If not, choose a new password now: that stops the change and signs out everybody else.</Paragraph>
    </Letter>
  );
}
