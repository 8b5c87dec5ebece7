import { Button } from '@mantine/core';
import { Link } from 'react-router-dom';
import { pagePaths } from '../../lib/paths.js';
import { ErrorPage } from './ErrorPage.js';

export function NotFoundPage() {
  return (
    <ErrorPage
      title="Nothing here"
      actions={
        <Button component={Link} to={pagePaths.programmes} variant="filled">
          Your programmes
        </Button>
      }
    >
      There is no page at this address, or it belongs to a programme of which you are not a member. If someone sent you the link, ask them
      to add you to the programme.
    </ErrorPage>
  );
}
