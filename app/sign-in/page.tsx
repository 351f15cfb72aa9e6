import type { Metadata } from 'next';
import { Heading } from '@/app/ui/frame/Heading';
import { Sheet } from '@/app/ui/frame/Sheet';
import { SignInForm } from './SignInForm';

export const metadata: Metadata = { title: 'Sign in' };

export default function SignInPage() {
  return (
    <Sheet>
      <Heading lead="With the address that your administrator invited.">Sign in</Heading>
      <SignInForm />
    </Sheet>
  );
}
