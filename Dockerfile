FROM python:3.12-slim

# The image holds the packages itself, so manage.py has nothing to install.
ENV LEDGER_BOOTSTRAP=off \
    LEDGER_DATA_DIR=/data \
    LEDGER_STATIC_DIR=/srv/static \
    OPENBLAS_NUM_THREADS=1 \
    OMP_NUM_THREADS=1 \
    PYTHONDONTWRITEBYTECODE=1 \
    PYTHONUNBUFFERED=1

WORKDIR /srv/ledger
COPY requirements.txt .
RUN pip install --no-cache-dir -r requirements.txt

COPY manage.py ./
COPY shop ./shop
COPY solver ./solver
COPY templates ./templates
COPY static ./static
RUN useradd --system --home-dir /data ledger \
    && mkdir -p /data /srv/static \
    && LEDGER_DATA_DIR=/tmp/build python manage.py collectstatic --noinput --verbosity 0 \
    && rm -rf /tmp/build \
    && chown ledger /data
USER ledger
VOLUME /data
EXPOSE 8000
