/** What a worker thread runs: one job in, one finished loop out. */
import { assessJob } from './assess-job';

export default assessJob;
