"""Settings. What differs between one bay and many shops comes from LEDGER_* variables alone (see DEVELOPERS.md)."""

from __future__ import annotations

import os
from pathlib import Path

from csp.constants import NONE, SELF

from shop.config import environment

ROOT = Path(__file__).resolve().parent.parent.parent
DATA_DIR = environment.data_folder(ROOT / "var")

# Compiled solver code is kept with the data, so that a code folder nobody may write to works too.
os.environ.setdefault("NUMBA_CACHE_DIR", str(DATA_DIR / "compiled"))

SECRET_KEY = environment.secret_key(DATA_DIR)
DEBUG = environment.flag("LEDGER_DEBUG")
ALLOWED_HOSTS = ["localhost", "127.0.0.1", "[::1]", *environment.listed("LEDGER_ALLOWED_HOSTS")]
CSRF_TRUSTED_ORIGINS = environment.listed("LEDGER_TRUSTED_ORIGINS")

INSTALLED_APPS = [
    "django.contrib.auth",
    "django.contrib.contenttypes",
    "django.contrib.sessions",
    "django.contrib.messages",
    "django.contrib.staticfiles",
    "django.contrib.humanize",
    "axes",
    "csp",
    "django_filters",
    "django_htmx",
    "drf_spectacular",
    "rest_framework",
    "shop.config",
    "shop.people",
    "shop.garage",
    "shop.setups",
    "shop.launches",
    "shop.studies",
    "shop.track",
    "shop.sheets",
    "shop.parts",
    "shop.api",
    "shop.demo",
]

MIDDLEWARE = [
    "django.middleware.security.SecurityMiddleware",
    "csp.middleware.CSPMiddleware",
    "whitenoise.middleware.WhiteNoiseMiddleware",
    "shop.config.uploads.UploadLimitMiddleware",
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.common.CommonMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "django.contrib.messages.middleware.MessageMiddleware",
    "django.middleware.clickjacking.XFrameOptionsMiddleware",
    "django_htmx.middleware.HtmxMiddleware",
    "shop.people.middleware.ShopMiddleware",
    "axes.middleware.AxesMiddleware",
]

ROOT_URLCONF = "shop.config.urls"
WSGI_APPLICATION = "shop.config.wsgi.application"
TEMPLATES = [
    {
        "BACKEND": "django.template.backends.django.DjangoTemplates",
        "DIRS": [ROOT / "templates"],
        "APP_DIRS": True,
        "OPTIONS": {
            "context_processors": [
                "django.template.context_processors.request",
                "django.contrib.auth.context_processors.auth",
                "django.contrib.messages.context_processors.messages",
            ],
        },
    }
]

DATABASES = {"default": environment.database("LEDGER_DATABASE_URL", DATA_DIR / "ledger.sqlite3")}
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

LANGUAGE_CODE = "en"
USE_I18N = False
USE_TZ = True
TIME_ZONE = environment.text("LEDGER_TIME_ZONE", "UTC")

# --- who signs in ---------------------------------------------------------------------------------------------------

AUTH_USER_MODEL = "people.User"
AUTHENTICATION_BACKENDS = ["axes.backends.AxesStandaloneBackend", "django.contrib.auth.backends.ModelBackend"]
LOGIN_URL = "people:sign-in"
LOGIN_REDIRECT_URL = "/"
LOGOUT_REDIRECT_URL = LOGIN_URL
PASSWORD_HASHERS = [
    "django.contrib.auth.hashers.Argon2PasswordHasher",
    "django.contrib.auth.hashers.PBKDF2PasswordHasher",
]
AUTH_PASSWORD_VALIDATORS = [
    {"NAME": "django.contrib.auth.password_validation.UserAttributeSimilarityValidator"},
    {"NAME": "django.contrib.auth.password_validation.MinimumLengthValidator", "OPTIONS": {"min_length": 10}},
    {"NAME": "django.contrib.auth.password_validation.CommonPasswordValidator"},
]
# Eight wrong passwords for one account from one address shut that pair out for a quarter of an hour.
AXES_FAILURE_LIMIT = 8
AXES_COOLOFF_TIME = 0.25
AXES_LOCKOUT_PARAMETERS = [["username", "ip_address"]]
AXES_USERNAME_FORM_FIELD = "username"  # what the sign-in form and authenticate() call it, though the model says email
AXES_RESET_ON_SUCCESS = True
AXES_LOCKOUT_CALLABLE = "shop.config.pages.shut_out"
AXES_DISABLE_ACCESS_LOG = True
AXES_VERBOSE = False

# --- what a browser may do ------------------------------------------------------------------------------------------

HTTPS = environment.flag("LEDGER_HTTPS")
SECURE_SSL_REDIRECT = HTTPS
SECURE_HSTS_SECONDS = 31_536_000 if HTTPS else 0
SECURE_CONTENT_TYPE_NOSNIFF = True
SECURE_REFERRER_POLICY = "same-origin"
SECURE_CROSS_ORIGIN_OPENER_POLICY = "same-origin"
if environment.flag("LEDGER_BEHIND_PROXY"):  # only then may a header say that the browser came by HTTPS
    SECURE_PROXY_SSL_HEADER = ("HTTP_X_FORWARDED_PROTO", "https")
SECURE_REDIRECT_EXEMPT = ["^healthz$"]
X_FRAME_OPTIONS = "DENY"
SESSION_COOKIE_NAME = "ledger_session"
SESSION_COOKIE_AGE = 14 * 24 * 3600
SESSION_COOKIE_SAMESITE = CSRF_COOKIE_SAMESITE = "Lax"
SESSION_COOKIE_HTTPONLY = True
SESSION_COOKIE_SECURE = CSRF_COOKIE_SECURE = HTTPS
CSRF_COOKIE_NAME = "ledger_csrf"
CONTENT_SECURITY_POLICY = {
    "DIRECTIVES": {
        "default-src": [SELF],
        "script-src": [SELF],
        "style-src": [SELF],
        "img-src": [SELF, "data:", "blob:"],  # the charts' own "save as picture" draws through both
        "object-src": [NONE],
        "base-uri": [NONE],
        "form-action": [SELF],
        "frame-ancestors": [NONE],
    }
}

# --- what comes in --------------------------------------------------------------------------------------------------

UPLOAD_LIMIT = environment.number("LEDGER_UPLOAD_LIMIT_MB", 64, least=1, most=2000) * 1024 * 1024
DATA_UPLOAD_MAX_MEMORY_SIZE = 8 * 1024 * 1024
FILE_UPLOAD_MAX_MEMORY_SIZE = 1024 * 1024
DATA_UPLOAD_MAX_NUMBER_FIELDS = 4000
DATA_UPLOAD_MAX_NUMBER_FILES = 20

# --- files served ---------------------------------------------------------------------------------------------------

STATIC_URL = "/static/"
STATIC_ROOT = Path(environment.text("LEDGER_STATIC_DIR", str(DATA_DIR / "static")))
STATICFILES_DIRS = [ROOT / "static"]
# No app directories: what packages bring is served only as far as shop.config.packaged lists it.
STATICFILES_FINDERS = ["django.contrib.staticfiles.finders.FileSystemFinder", "shop.config.packaged.PackagedFinder"]
STORAGES = {
    "default": {"BACKEND": "django.core.files.storage.FileSystemStorage", "OPTIONS": {"location": DATA_DIR / "files"}},
    "staticfiles": {"BACKEND": "whitenoise.storage.CompressedManifestStaticFilesStorage"},
}
WHITENOISE_KEEP_ONLY_HASHED_FILES = False

# --- API ------------------------------------------------------------------------------------------------------------

REST_FRAMEWORK = {
    "DEFAULT_AUTHENTICATION_CLASSES": [
        "shop.api.authentication.TokenAuthentication",
        "rest_framework.authentication.SessionAuthentication",
    ],
    "DEFAULT_PERMISSION_CLASSES": ["shop.api.authentication.MayInShop"],
    "DEFAULT_RENDERER_CLASSES": ["rest_framework.renderers.JSONRenderer"],
    "DEFAULT_PARSER_CLASSES": ["rest_framework.parsers.JSONParser", "rest_framework.parsers.MultiPartParser"],
    "DEFAULT_FILTER_BACKENDS": ["django_filters.rest_framework.DjangoFilterBackend"],
    "DEFAULT_PAGINATION_CLASS": "rest_framework.pagination.PageNumberPagination",
    "PAGE_SIZE": 50,
    "DEFAULT_SCHEMA_CLASS": "drf_spectacular.openapi.AutoSchema",
    "DEFAULT_THROTTLE_CLASSES": ["rest_framework.throttling.UserRateThrottle"],
    "DEFAULT_THROTTLE_RATES": {"user": "600/min"},
    "TEST_REQUEST_DEFAULT_FORMAT": "json",
}
SPECTACULAR_SETTINGS = {
    "TITLE": "Launch Ledger",
    "DESCRIPTION": "Cars, surveys, setup revisions and their launches, for one shop at a time.",
    "VERSION": "1",
    "SERVE_INCLUDE_SCHEMA": False,
    "COMPONENT_SPLIT_REQUEST": True,
}

# --- queue ----------------------------------------------------------------------------------------------------------

BROKER_URL = environment.text("LEDGER_BROKER_URL", "folder://localhost")
QUEUE_DIR = DATA_DIR / "queue"
SWEEP_SECONDS = environment.number("LEDGER_SWEEP_SECONDS", 10, least=1, most=600)

# --- words on the way -----------------------------------------------------------------------------------------------

LOGGING = {
    "version": 1,
    "disable_existing_loggers": False,
    "formatters": {"line": {"format": "%(asctime)s %(levelname)s %(name)s: %(message)s"}},
    "handlers": {"stderr": {"class": "logging.StreamHandler", "formatter": "line"}},
    "root": {"handlers": ["stderr"], "level": environment.text("LEDGER_LOG_LEVEL", "WARNING").upper()},
    # Django's own handlers would write each error twice, or mail it to nobody.
    "loggers": {
        "django": {"handlers": [], "propagate": True},
        "django.request": {"level": "ERROR"},  # a page not found is no news
        "waitress.queue": {"level": "ERROR"},  # it warns whenever two requests meet
    },
}
TEST_RUNNER = "shop.config.testing.PytestRunner"
