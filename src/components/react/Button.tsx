import type { ReactNode } from 'react';
import { Button as PressButton } from 'react-aria-components/Button';

export interface ButtonProps {
  children: ReactNode;
  tone?: 'plain' | 'primary' | 'beam' | 'quiet' | undefined;
  size?: 'small' | 'big' | undefined;
  /** While something goes on: its words, in place of the button's own. The button stays reachable and does nothing. */
  busy?: string | false | undefined;
  onPress?: (() => void) | undefined;
  type?: 'button' | 'submit' | undefined;
  isDisabled?: boolean | undefined;
  name?: string | undefined;
  value?: string | undefined;
  className?: string | undefined;
  'aria-label'?: string | undefined;
  'aria-describedby'?: string | undefined;
}

/** A button that tells a press from a scroll, a slip and a double touch. */
export function Button({ children, tone = 'plain', size, busy = false, onPress, className, isDisabled, ...rest }: ButtonProps) {
  const waiting = busy !== false && busy !== '';
  return (
    <PressButton
      {...rest}
      type={rest.type ?? 'button'}
      className={['btn', tone !== 'plain' && tone, size, className].filter(Boolean).join(' ')}
      isPending={waiting}
      {...(isDisabled === undefined ? {} : { isDisabled })}
      {...(onPress === undefined ? {} : { onPress: () => onPress() })}
    >
      {waiting ? busy : children}
    </PressButton>
  );
}
