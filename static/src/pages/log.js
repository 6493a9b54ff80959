/** The Log. */

import { startLog } from "../ui/log/start_log.js";

startLog();
