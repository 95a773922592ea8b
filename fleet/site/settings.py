"""All settings, for every way of running; what differs comes from the environment.

| variable | meaning | when absent |
|---|---|---|
| FRAMEBAY_DATA | folder of SQLite file, attachments and secret key | `data/` |
| DATABASE_URL | as `postgres://user@host/name` | SQLite in FRAMEBAY_DATA |
| FRAMEBAY_SECRET_KEY | signing key of sessions | made once, kept in FRAMEBAY_DATA |
| FRAMEBAY_SEAL_KEY | Ed25519 key of seals, base64 of its 32 bytes | made once, kept |
| FRAMEBAY_SEAL_HOURS | hours after which the last seal is called old | 24 |
| FRAMEBAY_BACKUPS | folder of backups; better elsewhere | `backups/` in FRAMEBAY_DATA |
| FRAMEBAY_HOSTS | host names served, comma between | this machine only |
| FRAMEBAY_HTTPS | 1 when served over TLS: secure cookies, HSTS | 0 |
| FRAMEBAY_PROXIES | how many proxies stand in front and are believed | 0 |
| FRAMEBAY_SIGN_IN_LIMIT | wrong passwords of a name and address before a lock | 5 |
| FRAMEBAY_SIGN_IN_WAIT | minutes until the lock opens by itself | 15 |
| FRAMEBAY_IDLE_MINUTES | minutes without a request that end a session | 30 |
| FRAMEBAY_SESSION_HOURS | hours that end a session in any case | 12 |
| FRAMEBAY_DEBUG | 1 shows tracebacks in the browser | 0 |
| FRAMEBAY_TODAY | the date taken as today | the demo's, if it is here; else the clock |
"""

from __future__ import annotations

import datetime as dt
import os
import secrets
from pathlib import Path

import dj_database_url
from csp.constants import NONE, SELF
from django.core.exceptions import ImproperlyConfigured

# Before numpy is imported: its systems here are small, threads only wait for each
# other, and sums must not depend on how many cores a machine has.
os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")

BASE_DIR = Path(__file__).resolve().parents[2]
FIXTURES = BASE_DIR / "fixtures"


def env_flag(name: str) -> bool:
    value = os.environ.get(name, "0")
    if value not in {"0", "1"}:
        raise ImproperlyConfigured(f"{name} is {value!r}; write 1 for yes or 0 for no.")
    return value == "1"


def env_count(name: str, default: int, least: int = 1) -> int:
    value = os.environ.get(name, str(default))
    if not value.isdecimal() or int(value) < least:
        raise ImproperlyConfigured(
            f"{name} is {value!r}; write a whole number, at least {least}."
        )
    return int(value)


DATA_DIR = Path(os.environ.get("FRAMEBAY_DATA", BASE_DIR / "data")).resolve()
DATA_DIR.mkdir(parents=True, exist_ok=True)
ATTACHMENTS = DATA_DIR / "attachments"
SEALS = DATA_DIR / "seals"
SEAL_KEY = os.environ.get("FRAMEBAY_SEAL_KEY", "")
SEAL_KEY_FILE = DATA_DIR / "seal_key"
SEAL_HOURS = env_count("FRAMEBAY_SEAL_HOURS", 24)
BACKUPS = Path(os.environ.get("FRAMEBAY_BACKUPS") or DATA_DIR / "backups").resolve()


def secret_key() -> str:
    """The key from the environment, or one made at first use and kept private."""
    if key := os.environ.get("FRAMEBAY_SECRET_KEY"):
        return key
    kept = DATA_DIR / "secret_key"
    try:
        handle = os.open(kept, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
    except FileExistsError:
        return kept.read_text()
    with os.fdopen(handle, "w") as file:
        file.write(secrets.token_urlsafe(50))
    return kept.read_text()


SECRET_KEY = secret_key()
DEBUG = env_flag("FRAMEBAY_DEBUG")
HTTPS = env_flag("FRAMEBAY_HTTPS")
PROXIES = env_count("FRAMEBAY_PROXIES", 0, least=0)
ALLOWED_HOSTS = os.environ.get("FRAMEBAY_HOSTS", "127.0.0.1,localhost,[::1]").split(",")
TODAY_FILE = "today"


def kept_today() -> str:
    """The date that `manage.py demo` left in FRAMEBAY_DATA, or ''."""
    kept = DATA_DIR / TODAY_FILE
    return kept.read_text().strip() if kept.exists() else ""


FRAMEBAY_TODAY = os.environ.get("FRAMEBAY_TODAY") or kept_today()

INSTALLED_APPS = [
    "fleet",  # first: its createsuperuser takes the place of Django's
    "django.contrib.auth",
    "django.contrib.contenttypes",
    "django.contrib.sessions",
    "django.contrib.messages",
    "django.contrib.staticfiles",
    "axes",
    "csp",
    "django_filters",
    "django_otp",
    "django_otp.plugins.otp_static",
    "django_otp.plugins.otp_totp",
    "repairs",
    "reports",
]
RECORDED_APPS = ["fleet", "repairs"]  # whose rows the history must explain
MIDDLEWARE = [
    "django.middleware.security.SecurityMiddleware",
    "fleet.views.guard.headers",
    "whitenoise.middleware.WhiteNoiseMiddleware",
    "csp.middleware.CSPMiddleware",
    "django.contrib.sessions.middleware.SessionMiddleware",
    "django.middleware.common.CommonMiddleware",
    "django.middleware.csrf.CsrfViewMiddleware",
    "django.contrib.auth.middleware.AuthenticationMiddleware",
    "django.contrib.auth.middleware.LoginRequiredMiddleware",
    "django.contrib.messages.middleware.MessageMiddleware",
    "fleet.views.guard.session_age",
    "fleet.views.once.once",
    "django.middleware.clickjacking.XFrameOptionsMiddleware",
]
ROOT_URLCONF = "fleet.site.urls"
WSGI_APPLICATION = "fleet.site.wsgi.application"
TEMPLATES = [
    {
        "BACKEND": "django.template.backends.django.DjangoTemplates",
        "APP_DIRS": True,
        "OPTIONS": {
            "context_processors": [
                "django.template.context_processors.request",
                "django.contrib.auth.context_processors.auth",
                "django.contrib.messages.context_processors.messages",
                "fleet.views.context.page",
            ],
            "builtins": ["fleet.templatetags.quantities", "fleet.templatetags.forms"],
        },
    }
]

# SQLite takes its write lock when a transaction begins, so that two writers queue
# and neither sees "database is locked" half-way.
SQLITE_OPTIONS = {
    "transaction_mode": "IMMEDIATE",
    "timeout": 20,
    "init_command": (
        "PRAGMA journal_mode=WAL; PRAGMA synchronous=FULL; PRAGMA foreign_keys=ON; "
        "PRAGMA cache_size=-64000; PRAGMA temp_store=MEMORY;"
    ),
}
DATABASE_URL = os.environ.get("DATABASE_URL") or (
    f"sqlite:///{DATA_DIR / 'framebay.sqlite3'}"
)
DATABASES = {"default": dj_database_url.parse(DATABASE_URL, conn_max_age=60)}
if DATABASES["default"]["ENGINE"].endswith("sqlite3"):
    DATABASES["default"]["OPTIONS"] = SQLITE_OPTIONS
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

AUTH_USER_MODEL = "fleet.User"
AUTHENTICATION_BACKENDS = [
    "axes.backends.AxesStandaloneBackend",
    "django.contrib.auth.backends.ModelBackend",
]
AXES_FAILURE_LIMIT = env_count("FRAMEBAY_SIGN_IN_LIMIT", 5)
AXES_COOLOFF_TIME = dt.timedelta(minutes=env_count("FRAMEBAY_SIGN_IN_WAIT", 15))
AXES_LOCKOUT_PARAMETERS = [["username", "ip_address"]]
AXES_CLIENT_IP_CALLABLE = "fleet.services.attempts.address_of"
AXES_SENSITIVE_PARAMETERS = ["username", "ip_address", "code", "csrfmiddlewaretoken"]
AXES_RESET_ON_SUCCESS = True
AXES_RESET_COOL_OFF_ON_FAILURE_DURING_LOCKOUT = False
AXES_DISABLE_ACCESS_LOG = True
AXES_ENABLE_ADMIN = False
AXES_VERBOSE = False
SILENCED_SYSTEM_CHECKS = ["axes.W002"]  # the sign-in page answers when it is locked
OTP_TOTP_ISSUER = "Framebay"
PASSWORD_HASHERS = ["django.contrib.auth.hashers.Argon2PasswordHasher"]
AUTH_PASSWORD_VALIDATORS = [
    {"NAME": f"django.contrib.auth.password_validation.{name}"}
    for name in (
        "UserAttributeSimilarityValidator",
        "MinimumLengthValidator",
        "CommonPasswordValidator",
        "NumericPasswordValidator",
    )
]
LINK_HOURS = 4  # how long the link to a new password holds
PASSWORD_RESET_TIMEOUT = LINK_HOURS * 3600
LOGIN_URL = "sign_in"
LOGIN_REDIRECT_URL = "overview"
LOGOUT_REDIRECT_URL = "sign_in"

LANGUAGE_CODE = "en-gb"
TIME_ZONE = "UTC"
USE_TZ = True
USE_I18N = True

STATIC_URL = "/static/"
WHITENOISE_USE_FINDERS = True  # static files need no collecting step
DATA_UPLOAD_MAX_MEMORY_SIZE = 25 * 1024 * 1024
FILE_UPLOAD_MAX_MEMORY_SIZE = 5 * 1024 * 1024

CONTENT_SECURITY_POLICY = {
    "DIRECTIVES": {
        "default-src": [NONE],
        "script-src": [SELF],
        "style-src": [SELF],
        "img-src": [SELF],
        "font-src": [SELF],
        "connect-src": [SELF],
        "form-action": [SELF],
        "base-uri": [NONE],
        "frame-ancestors": [NONE],
    }
}
X_FRAME_OPTIONS = "DENY"
SECURE_REFERRER_POLICY = "same-origin"
SESSION_COOKIE_HTTPONLY = CSRF_COOKIE_HTTPONLY = True
SESSION_COOKIE_SAMESITE = CSRF_COOKIE_SAMESITE = "Lax"
SESSION_IDLE = dt.timedelta(minutes=env_count("FRAMEBAY_IDLE_MINUTES", 30))
SESSION_LASTS = dt.timedelta(hours=env_count("FRAMEBAY_SESSION_HOURS", 12))
SESSION_COOKIE_AGE = int(SESSION_LASTS.total_seconds())
SESSION_COOKIE_SECURE = CSRF_COOKIE_SECURE = HTTPS
SECURE_SSL_REDIRECT = HTTPS
if PROXIES:
    SECURE_PROXY_SSL_HEADER = ("HTTP_X_FORWARDED_PROTO", "https")
SECURE_HSTS_SECONDS = 31_536_000 if HTTPS else 0
SECURE_HSTS_INCLUDE_SUBDOMAINS = SECURE_HSTS_PRELOAD = HTTPS

LOGGING = {
    "version": 1,
    "disable_existing_loggers": False,
    "formatters": {
        "line": {"format": "{asctime} {levelname} {name} {message}", "style": "{"}
    },
    "handlers": {"console": {"class": "logging.StreamHandler", "formatter": "line"}},
    "root": {"handlers": ["console"], "level": "WARNING"},
}
