import classes from './components.module.css';

/** Stands beside the name of everything that was never observed. */
export const Simulated = () => <span className={classes.simulated}>simulated</span>;
