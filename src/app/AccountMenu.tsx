/** The person's own pages, and the way out. */
import { useQueryClient } from '@tanstack/react-query';
import { Menu, MenuItem, MenuTrigger, Popover } from 'react-aria-components';
import { useNavigate } from 'react-router-dom';
import { useAbility, useMe } from '../access/ability.ts';
import { send } from '../api/client.ts';
import { Button } from '../components/Button.tsx';

const item = 'flex min-h-11 cursor-pointer items-center px-4 outline-none hover:bg-brass-wash focus:bg-brass-wash sm:min-h-9';

export function AccountMenu() {
  const me = useMe();
  const ability = useAbility();
  const navigate = useNavigate();
  const client = useQueryClient();
  const signOut = async () => {
    // Without connection, or when the session has ended already, the person still leaves this page.
    await send('post', '/api/auth/sign-out', { body: {} }).catch(() => null);
    await navigate('/sign-in');
    client.clear();
  };
  return (
    <MenuTrigger>
      <Button kind="plain"><span className="max-w-44 truncate max-sm:max-w-24">{me?.user.name}</span></Button>
      <Popover placement="bottom end" className="border border-rule-strong bg-paper-raised">
        <Menu aria-label="Account" className="min-w-52 py-1 outline-none">
          <MenuItem className={item} onAction={() => void navigate('/tokens')}>Personal tokens</MenuItem>
          {ability.can('read', 'User') && <MenuItem className={item} onAction={() => void navigate('/admin')}>Administration</MenuItem>}
          {me?.demo && <MenuItem className={item} onAction={() => void navigate('/demo-inbox')}>Demo inbox</MenuItem>}
          <MenuItem className={item} onAction={() => void signOut()}>Sign out</MenuItem>
        </Menu>
      </Popover>
    </MenuTrigger>
  );
}
