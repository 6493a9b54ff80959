"""Pages and REST without the live channel, for a server that scales them separately."""

import os

from django.core.wsgi import get_wsgi_application

os.environ.setdefault("DJANGO_SETTINGS_MODULE", "campaigns.project.settings")

application = get_wsgi_application()

# Needs the apps, which exist from here on.
from campaigns import background  # noqa: E402

background.listen()
