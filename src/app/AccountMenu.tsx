/** The person's own pages, and the way out. */
import { useQueryClient } from '@tanstack/react-query';
import { Menu, MenuItem, MenuTrigger, Popover } from 'react-aria-components';
import { useNavigate } from 'react-router-dom';
import { useAbility, useMe } from '../access/ability.ts';
import { Button } from '../components/Button.tsx';

export function AccountMenu() {
  const me = useMe();
  const ability = useAbility();
  const navigate = useNavigate();
  const client = useQueryClient();
  const signOut = async () => {
    await fetch('/api/auth/sign-out', { method: 'POST', credentials: 'same-origin', headers: { 'content-type': 'application/json' }, body: '{}' });
    client.clear();
    void navigate('/sign-in');
  };
  const item = 'cursor-pointer px-4 py-2 outline-none data-[focused]:bg-brass-wash';
  return (
    <MenuTrigger>
      <Button kind="plain">{me?.user.name}</Button>
      <Popover placement="bottom end" className="border border-rule-strong bg-paper">
        <Menu aria-label="Account" className="min-w-48 py-1 outline-none">
          <MenuItem className={item} onAction={() => void navigate('/tokens')}>Personal tokens</MenuItem>
          {ability.can('read', 'User') && <MenuItem className={item} onAction={() => void navigate('/admin')}>Administration</MenuItem>}
          {me?.demo && <MenuItem className={item} onAction={() => void navigate('/demo-inbox')}>Demo inbox</MenuItem>}
          <MenuItem className={item} onAction={() => void signOut()}>Sign out</MenuItem>
        </Menu>
      </Popover>
    </MenuTrigger>
  );
}
