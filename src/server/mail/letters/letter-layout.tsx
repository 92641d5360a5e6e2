import {
  Body,
  Button,
  Column,
  Container,
  Head,
  Heading,
  Hr,
  Html,
  Link,
  Preview,
  Row,
  Section,
  Text,
} from '@react-email/components';
import { STUDIO } from '../../../commission/studio';
import { listInWords } from '../letter-words';
import type { Frame } from '../render';
import type { LetterContent } from './letter';
import { LOOK } from './letter-style';

/** One layout for all letters: what happened, whose turn it is and the one link; the parting line; the details. */
export function LetterLayout({ content, frame }: { content: LetterContent; frame: Frame }) {
  const { heading, preview, about, name, lead, details } = content;
  return (
    <Html lang="en-GB">
      <Head>
        <meta name="color-scheme" content="light" />
        <title>{heading}</title>
      </Head>
      <Preview>{preview}</Preview>
      <Body style={LOOK.body}>
        <Container style={LOOK.frame}>
          <Row>
            <Column>
              <Text style={LOOK.studio}>{frame.studio.name}</Text>
            </Column>
            <Column>
              <Text style={LOOK.ref}>{about?.ref ?? ''}</Text>
            </Column>
          </Row>
          <Heading style={LOOK.title}>{heading}</Heading>
          {about && <Text style={LOOK.piece}>{about.title}</Text>}
          {name && <Text style={LOOK.text}>Dear {name},</Text>}
          {lead}
          <Turn content={content} publicUrl={frame.publicUrl} />
          {details && (
            <>
              <Hr style={LOOK.partingLine} />
              {details}
            </>
          )}
          <SignOff frame={frame} content={content} />
        </Container>
      </Body>
    </Html>
  );
}

function Turn({ content: { next, link }, publicUrl }: { content: LetterContent; publicUrl: string }) {
  return (
    <>
      <Section style={next.turn === 'yours' ? LOOK.turnYours : LOOK.turnOther}>
        <Text style={LOOK.turnText}>
          <span style={LOOK.strong}>{TURN_WORDS[next.turn]} </span>
          {next.words}
        </Text>
      </Section>
      <Section>
        <Text style={{ ...LOOK.text, margin: '22px 0 0' }}>
          <Button href={new URL(link.to, publicUrl).href} style={next.turn === 'yours' ? LOOK.buttonMain : LOOK.button}>
            {link.label}
          </Button>
        </Text>
      </Section>
    </>
  );
}

const TURN_WORDS = { yours: 'Your turn.', ours: 'Our turn.', nobody: 'Nothing to do.' };

function SignOff({ frame: { studio, publicUrl }, content }: { frame: Frame; content: LetterContent }) {
  const privacy = (
    <Link href={`${publicUrl}/privacy`} style={LOOK.link}>
      What we keep about you
    </Link>
  );
  if (content.toStudio) {
    return (
      <>
        <Hr style={LOOK.hairline} />
        <Text style={LOOK.small}>Sent to the owners by the pages of {studio.name}.</Text>
      </>
    );
  }
  return (
    <>
      <Hr style={LOOK.hairline} />
      <Text style={LOOK.text}>{listInWords(STUDIO.owners)}</Text>
      <Text style={LOOK.small}>
        {studio.name}, {studio.place}. Answer this mail and one of us reads it.
      </Text>
      <Text style={LOOK.small}>
        {content.about ? 'All of this is on the commission’s page as well. ' : ''}We are not told whether you open our
        mails. {privacy}
      </Text>
    </>
  );
}
