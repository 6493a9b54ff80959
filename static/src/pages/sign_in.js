/** Sign in by name and password. */

import { showSignIn } from "../ui/home/sign_in.js";
import { pageElement } from "../ui/shell/element.js";

showSignIn(pageElement());
