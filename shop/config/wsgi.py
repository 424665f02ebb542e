"""What a web server calls."""

import os

os.environ.setdefault("DJANGO_SETTINGS_MODULE", "shop.config.settings")

from django.core.wsgi import get_wsgi_application

application = get_wsgi_application()

from shop.config import warming

warming.warm_aside()
