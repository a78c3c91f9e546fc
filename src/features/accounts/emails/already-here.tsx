import { Letter, Paragraph, SmallPrint } from './letter';

export const ALREADY_SUBJECT = 'You already have an account';

/** To the owner of an account whose address somebody signed up with again. */
export function AlreadyHere({ name, signIn, reset }: { name: string; signIn: string; reset: string }) {
  return (
    <Letter
      preview="Somebody signed up with this address, which already has an account."
      heading="You already have an account"
      name={name}
      link={{ label: 'Sign in', href: signIn }}
      after={<SmallPrint>If it was not you, there is nothing to do: nothing was changed, and whoever it was has not been told that you are here.</SmallPrint>}
    >
      <Paragraph>Somebody, most likely you, used this address just now to sign up. It has an account already, so nothing new was made.</Paragraph>
      <Paragraph>
        If you have forgotten the password, choose a new one here:{' '}
        <a href={reset} style={{ color: '#17564b' }}>
          {reset}
        </a>
      </Paragraph>
    </Letter>
  );
}
