"""Settings: the one file that reads the environment. The variables are named in DEVELOPERS.md."""

from pathlib import Path
from typing import Any

import environ

from campaigns.project.secret_key import read_or_make_secret_key

ROOT = Path(__file__).resolve().parents[2]

env = environ.Env()

# Every variable that is read, and nothing else (a test compares this with DEVELOPERS.md).
ENVIRONMENT = (
    "DATABASE_URL",
    "REDIS_URL",
    "QUARTERSKY_DATA",
    "QUARTERSKY_SECRET_KEY",
    "QUARTERSKY_HOSTS",
    "QUARTERSKY_HTTPS",
    "QUARTERSKY_DEBUG",
)

DEBUG: bool = env.bool("QUARTERSKY_DEBUG", default=False)
DATA = Path(env.str("QUARTERSKY_DATA", default=str(ROOT / ".data"))).resolve()
DATA.mkdir(parents=True, exist_ok=True)
UPLOADS = DATA / "uploads"
# Arrays that can be computed again at any time.
COMPUTED = DATA / "computed"
REDIS_URL: str = env.str("REDIS_URL", default="")

SECRET_KEY: str = env.str("QUARTERSKY_SECRET_KEY", default="") or read_or_make_secret_key(
    DATA / "secret-key"
)
# `serve` adds the names of its own machine when it listens beyond it and this is empty.
HOSTS: list[str] = env.list("QUARTERSKY_HOSTS", default=[])
ALLOWED_HOSTS = HOSTS or ["localhost", "127.0.0.1", "[::1]"]

INSTALLED_APPS = [
    "django.contrib.contenttypes",
    "django.contrib.auth",
    "django.contrib.sessions",
    "rest_framework",
    "drf_spectacular",
    "csp",
    "django_tasks",
    "django_tasks_db",
    "observers",
    "campaigns",
]

MIDDLEWARE = [
    "django.middleware.security.SecurityMiddleware",
    "csp.middleware.CSPMiddleware",
    "campaigns.project.static_files.StaticFilesMiddleware",
    "django.middleware.gzip.GZipMiddleware",
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.common.CommonMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "campaigns.project.headers.HeadersMiddleware",
]

ROOT_URLCONF = "campaigns.project.urls"
ASGI_APPLICATION = "campaigns.project.asgi.application"
WSGI_APPLICATION = "campaigns.project.wsgi.application"
APPEND_SLASH = True

TEMPLATES = [
    {
        "BACKEND": "django.template.backends.django.DjangoTemplates",
        "APP_DIRS": True,
        "OPTIONS": {"context_processors": ["django.template.context_processors.request"]},
    }
]

# --- database -----------------------------------------------------------------------------


def _database() -> dict[str, Any]:
    """SQLite in .data/ unless DATABASE_URL says otherwise."""
    url = env.str("DATABASE_URL", default="") or f"sqlite:///{DATA / 'quartersky.sqlite3'}"
    database = dict(env.db_url_config(url))
    if database["ENGINE"] == "django.db.backends.sqlite3":
        # IMMEDIATE: a transaction that will write takes its turn before it reads.
        # FULL: an acknowledged report survives a power failure, not only a killed process.
        database["OPTIONS"] = {
            "transaction_mode": "IMMEDIATE",
            "timeout": 20,
            "init_command": "PRAGMA journal_mode=WAL; PRAGMA synchronous=FULL;",
        }
    else:
        database["CONN_HEALTH_CHECKS"] = True
    return database


DATABASES = {"default": _database()}
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

CACHES = {
    "default": {
        "BACKEND": "django.core.cache.backends.redis.RedisCache",
        "LOCATION": REDIS_URL,
    }
    if REDIS_URL
    else {"BACKEND": "django.core.cache.backends.locmem.LocMemCache"}
}

TASKS = {"default": {"BACKEND": "django_tasks_db.DatabaseBackend", "QUEUES": ["default"]}}

# --- people and sessions --------------------------------------------------------------------

AUTH_USER_MODEL = "observers.Person"
AUTHENTICATION_BACKENDS = ["observers.actions.sign_in.NameBackend"]
AUTH_PASSWORD_VALIDATORS = [
    {
        "NAME": "django.contrib.auth.password_validation.MinimumLengthValidator",
        "OPTIONS": {"min_length": 10},
    },
    {"NAME": "django.contrib.auth.password_validation.CommonPasswordValidator"},
]
LOGIN_URL = "sign-in"

# Behind a proxy that speaks https: cookies for https only, and the proxy's word is believed.
HTTPS: bool = env.bool("QUARTERSKY_HTTPS", default=False)
if HTTPS:
    SECURE_PROXY_SSL_HEADER = ("HTTP_X_FORWARDED_PROTO", "https")
    SECURE_HSTS_SECONDS = 31_536_000
SESSION_COOKIE_NAME = "quartersky_session"
SESSION_COOKIE_HTTPONLY = True
SESSION_COOKIE_SAMESITE = "Lax"
SESSION_COOKIE_SECURE = HTTPS
# A season: nobody types a password in the dark.
SESSION_COOKIE_AGE = 90 * 24 * 3600
CSRF_COOKIE_NAME = "quartersky_csrf"
CSRF_COOKIE_SAMESITE = "Lax"
CSRF_COOKIE_SECURE = HTTPS
CSRF_FAILURE_VIEW = "campaigns.project.failures.csrf_failure"

# --- what the browser may do ----------------------------------------------------------------

CONTENT_SECURITY_POLICY = {
    "DIRECTIVES": {
        "default-src": ["'none'"],
        "script-src": ["'self'"],
        "style-src": ["'self'"],
        "img-src": ["'self'", "data:", "blob:"],
        "font-src": ["'self'"],
        "connect-src": ["'self'"],
        "worker-src": ["'self'"],
        "manifest-src": ["'self'"],
        "base-uri": ["'none'"],
        "form-action": ["'self'"],
        "frame-ancestors": ["'none'"],
    }
}
X_FRAME_OPTIONS = "DENY"
SECURE_CONTENT_TYPE_NOSNIFF = True
SECURE_REFERRER_POLICY = "same-origin"
SECURE_CROSS_ORIGIN_OPENER_POLICY = "same-origin"

STATIC_URL = "/static/"
STATIC_ROOT = ROOT / "static" / "dist"
# Our file names carry no hash: the browser asks each time and hears 304.
WHITENOISE_MAX_AGE = 0
WHITENOISE_AUTOREFRESH = True
WHITENOISE_ALLOW_ALL_ORIGINS = False

# --- the API --------------------------------------------------------------------------------

REST_FRAMEWORK = {
    "DEFAULT_AUTHENTICATION_CLASSES": [
        "campaigns.api.authentication.BearerAuthentication",
        "campaigns.api.authentication.SessionAuthentication",
    ],
    # Views that onlookers may read without an account say so themselves.
    "DEFAULT_PERMISSION_CLASSES": ["rest_framework.permissions.IsAuthenticated"],
    "DEFAULT_PARSER_CLASSES": ["rest_framework.parsers.JSONParser"],
    "DEFAULT_RENDERER_CLASSES": ["rest_framework.renderers.JSONRenderer"],
    "DEFAULT_SCHEMA_CLASS": "drf_spectacular.openapi.AutoSchema",
    "EXCEPTION_HANDLER": "campaigns.api.problems.handle_exception",
    "TEST_REQUEST_DEFAULT_FORMAT": "json",
    "COERCE_DECIMAL_TO_STRING": False,
    "UNICODE_JSON": True,
}
SPECTACULAR_SETTINGS = {
    "TITLE": "Quartersky",
    "DESCRIPTION": (
        "A campaign board for distributed observers. Errors are RFC 9457 problem details."
    ),
    "VERSION": "1",
    "OAS_VERSION": "3.1.1",
    "SCHEMA_PATH_PREFIX": "/api/v1",
    "SERVE_INCLUDE_SCHEMA": False,
    "SERVE_PERMISSIONS": ["rest_framework.permissions.AllowAny"],
    "POSTPROCESSING_HOOKS": [
        "drf_spectacular.hooks.postprocess_schema_enums",
        "campaigns.api.schema.finish_schema",
    ],
}
# Forms and JSON bodies; alert files have a limit of their own (campaigns/project/body_limit.py).
DATA_UPLOAD_MAX_MEMORY_SIZE = 2_500_000
FILE_UPLOAD_TEMP_DIR = None

# --- the live channel -----------------------------------------------------------------------

# Messages that one screen may have waiting before it is told to ask again.
LIVE_QUEUE_LENGTH = 1000
LIVE_HEARTBEAT_S = 20.0
# How often a hub looks in the database for what other processes wrote.
LIVE_POLL_S = 1.0
# Coverage: the first change goes at once, later ones at most 5 a second.
LIVE_COVERAGE_EVERY_S = 0.2

# --- words and times ------------------------------------------------------------------------

USE_TZ = True
TIME_ZONE = "UTC"
USE_I18N = False
LANGUAGE_CODE = "en"

LOGGING = {
    "version": 1,
    "disable_existing_loggers": False,
    "formatters": {
        "plain": {"format": "{asctime} {levelname} {name}: {message}", "style": "{"},
    },
    "handlers": {"stderr": {"class": "logging.StreamHandler", "formatter": "plain"}},
    "root": {"handlers": ["stderr"], "level": "INFO" if DEBUG else "WARNING"},
    "loggers": {
        # Refusals are answers, not incidents.
        "django.request": {"level": "ERROR"},
        "django.security.DisallowedHost": {"level": "CRITICAL"},
        "django_tasks": {"level": "WARNING"},
        "django_tasks_db": {"level": "WARNING"},
        "uvicorn.access": {"level": "WARNING"},
    },
}
