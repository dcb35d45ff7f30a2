import { DropdownMenu } from 'radix-ui';
import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { roleNames } from '@shared/features/accounts/accounts.rules';
import { holds, useAccount, useSignOut } from '@/features/accounts/accounts.queries';
import { sayFailure } from '@/lib/problem';
import { applyTheme, storedTheme, type Theme } from '@/lib/theme';

const item =
  'quiet block w-full min-h-[28px] px-4 py-1 text-left text-ui text-ink outline-none data-highlighted:bg-actwash cursor-pointer';

/** Who is signed in; own pages, paper or slate, sign out. */
export function PersonMenu() {
  const account = useAccount();
  const signOut = useSignOut();
  const navigate = useNavigate();
  const [theme, setTheme] = useState<Theme>(storedTheme);
  if (!account) return null;
  const leave = () =>
    signOut.mutate(undefined, { onSuccess: () => void navigate('/sign-in'), onError: sayFailure });
  const role = account.grants[0];
  return (
    <DropdownMenu.Root>
      <DropdownMenu.Trigger className="flex min-h-[28px] items-center gap-2 text-ui whitespace-nowrap">
        <b className="font-semibold">{account.printedName}</b>
        {role && <span className="text-dense text-ink3 max-lg:hidden">{roleNames[role.role]}</span>}
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align="end"
          sideOffset={6}
          className="z-50 min-w-[200px] border-[1.75px] border-ink bg-sheet py-1 shadow-float"
        >
          <DropdownMenu.Item asChild>
            <Link to="/home" className={item}>
              My events
            </Link>
          </DropdownMenu.Item>
          <DropdownMenu.Item asChild>
            <Link to="/profile" className={item}>
              Profile and sessions
            </Link>
          </DropdownMenu.Item>
          {holds(account, 'administrator') && (
            <DropdownMenu.Item asChild>
              <Link to="/office/accounts" className={item}>
                Office
              </Link>
            </DropdownMenu.Item>
          )}
          <DropdownMenu.Separator className="my-1 h-px bg-rule" />
          <DropdownMenu.RadioGroup
            value={theme}
            onValueChange={(next) => {
              setTheme(next as Theme);
              applyTheme(next as Theme);
            }}
          >
            {(['paper', 'slate', 'system'] as const).map((name) => (
              <DropdownMenu.RadioItem key={name} value={name} className={item}>
                <span className="inline-block w-4" aria-hidden="true">
                  {theme === name ? '✓' : ''}
                </span>
                {{ paper: 'Paper', slate: 'Slate', system: 'As the system' }[name]}
              </DropdownMenu.RadioItem>
            ))}
          </DropdownMenu.RadioGroup>
          <DropdownMenu.Separator className="my-1 h-px bg-rule" />
          <DropdownMenu.Item className={item} onSelect={leave}>
            Sign out
          </DropdownMenu.Item>
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
