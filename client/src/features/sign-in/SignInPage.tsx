import { useQueryClient } from '@tanstack/react-query';
import { Link, useNavigate, useSearchParams } from 'react-router-dom';
import { pagePaths, safeNext } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import { Motif } from './Motif.js';
import classes from './sign-in.module.css';
import { SignInForm } from './SignInForm.js';

export function SignInPage() {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  return (
    <main className={classes.page}>
      <title>Sign in · Foreveil</title>
      <Motif />
      <div className={classes.door}>
        <h1>Foreveil</h1>
        <p className={classes.lead}>Spectral lines, identified together</p>
        <SignInForm
          onSignedIn={(me) => {
            client.setQueryData(accountQueries.me().queryKey, me);
            void navigate(safeNext(search.get('next')), { replace: true });
          }}
        />
        <p className={classes.more}>
          <Link to={pagePaths.forgotPassword}>Forgotten your password?</Link>
        </p>
      </div>
      <footer className={classes.foot}>
        The light above is a simulated star, 380–680 nm; the threads are the lines of one cloud before it. An account comes with an
        invitation by mail.
      </footer>
    </main>
  );
}
