/** Every page: theme, clock, account, number pad. */

import { startShell } from "../ui/shell/start_shell.js";

startShell();
