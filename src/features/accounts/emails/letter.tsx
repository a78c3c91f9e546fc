import { Body, Button, Container, Head, Heading, Html, Preview, Section, Text } from '@react-email/components';
import type { ReactNode } from 'react';

// The product's own colours, written out: mail programs know no custom properties.
const ink = '#12181d';
const quiet = '#4a565e';
const spruce = '#17564b';
const rule = '#d8d3c4';

const text = { color: ink, fontSize: '16px', lineHeight: '25px', margin: '0 0 16px' } as const;
const small = { color: quiet, fontSize: '14px', lineHeight: '21px', margin: '0 0 12px' } as const;

interface Props {
  /** The line a mail program shows beside the subject. */
  preview: string;
  heading: string;
  /** How the person is called. */
  name?: string;
  /** What the mail says, before the link. */
  children: ReactNode;
  link?: { label: string; href: string };
  /** Small print after the link. */
  after?: ReactNode;
}

/** One paragraph of a mail. */
export function Paragraph({ children }: { children: ReactNode }) {
  return <Text style={text}>{children}</Text>;
}

/** One paragraph of small print. */
export function SmallPrint({ children }: { children: ReactNode }) {
  return <Text style={small}>{children}</Text>;
}

/**
 * The shell of every mail: a name, a few paragraphs, at most one link. The link also stands as
 * text, because some mail programs draw no buttons; the plain-text version has it once.
 */
export function Letter({ preview, heading, name, children, link, after }: Props) {
  return (
    <Html lang="en" dir="ltr">
      <Head />
      <Preview>{preview}</Preview>
      <Body style={{ backgroundColor: '#faf8f3', fontFamily: "'Work Sans', 'Segoe UI', Helvetica, Arial, sans-serif", margin: '0', padding: '24px 12px' }}>
        <Container style={{ backgroundColor: '#ffffff', border: `1px solid ${rule}`, borderRadius: '3px', maxWidth: '560px', padding: '28px 28px 16px' }}>
          <Heading as="h1" style={{ color: ink, fontSize: '22px', lineHeight: '28px', fontWeight: 600, margin: '0 0 18px' }}>
            {heading}
          </Heading>
          {name && <Text style={text}>Dear {name},</Text>}
          {children}
          {link && (
            <>
              <Section data-skip-in-text="true" style={{ margin: '4px 0 20px' }}>
                <Button href={link.href} style={{ backgroundColor: spruce, borderRadius: '3px', color: '#ffffff', fontSize: '16px', fontWeight: 600, padding: '12px 20px' }}>
                  {link.label}
                </Button>
              </Section>
              <Text style={small}>
                If the button does nothing, copy this address into your browser:
                <br />
                <a href={link.href} style={{ color: spruce, wordBreak: 'break-all' }}>
                  {link.href}
                </a>
              </Text>
            </>
          )}
          {after}
          <Text style={{ ...small, borderTop: `1px solid ${rule}`, marginTop: '20px', paddingTop: '12px' }}>
            Fairlead keeps science tournaments running true. This mail was sent because somebody used this address there.
          </Text>
        </Container>
      </Body>
    </Html>
  );
}
