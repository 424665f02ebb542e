"""Customers and cars: lists with a search, their pages, and the forms that change them."""

from __future__ import annotations

from django.contrib import messages
from django.core.paginator import Paginator
from django.db.models import Count, Q, QuerySet
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render

from shop.garage import services
from shop.garage.forms import CarForm, CustomerForm
from shop.garage.models import Car, Customer
from shop.garage.overview import car_lines, jobs_of
from shop.launches import bridge
from shop.people.access import action_view, form_view, shop_view
from shop.people.permissions import WRITE
from shop.refusals import Refused, Stale

REFUSED = 422


def _words(request: HttpRequest) -> str:
    return request.GET.get("q", "").strip()[:80]


@shop_view()
def cars(request: HttpRequest) -> HttpResponse:
    words, away = _words(request), "away" in request.GET
    found = Car.objects.select_related("customer").filter(archived_at__isnull=not away)
    for word in words.split():
        found = found.filter(
            Q(name__icontains=word) | Q(racing_number__icontains=word) | Q(race_class__icontains=word)
            | Q(customer__name__icontains=word) | Q(chassis__icontains=word)
        )
    page = Paginator(found.order_by("name", "id"), 40).get_page(request.GET.get("page"))
    context = {"page": page, "lines": car_lines(page.object_list), "words": words, "away": away,
               "may_write": request.member.may(WRITE)}
    return render(request, "garage/cars.html", context)


@shop_view()
def car(request: HttpRequest, pk: int) -> HttpResponse:
    car = get_object_or_404(Car.objects.select_related("customer", "shop"), pk=pk)
    revisions = list(car.revisions.select_related("author", "parent", "survey__car", "car", "shop"))
    issued = [revision for revision in revisions if revision.issued]
    drawing = None
    if issued:
        from shop.drawing.side_view import side_view

        try:
            drawing = side_view(bridge.scene_of(issued[0]))
        except Refused:
            drawing = None
    context = {
        "car": car, "revisions": revisions, "current": issued[0] if issued else None, "drawing": drawing,
        "surveys": car.surveys.select_related("taken_by").annotate(revision_count=Count("revisions")).order_by("-number"),
        "jobs": jobs_of(issued), "may_write": request.member.may(WRITE),
        "provisional": bridge.provisional(issued[0]) if issued else [],
    }
    return render(request, "garage/car.html", context)


@shop_view()
def customers(request: HttpRequest) -> HttpResponse:
    words, away = _words(request), "away" in request.GET
    found: QuerySet[Customer] = Customer.objects.filter(archived_at__isnull=not away)
    for word in words.split():
        found = found.filter(Q(name__icontains=word) | Q(phone__icontains=word) | Q(email__icontains=word))
    page = Paginator(found.annotate(car_count=Count("cars")).order_by("name", "id"), 40).get_page(request.GET.get("page"))
    context = {"page": page, "words": words, "away": away, "may_write": request.member.may(WRITE)}
    return render(request, "garage/customers.html", context)


@shop_view()
def customer(request: HttpRequest, pk: int) -> HttpResponse:
    customer = get_object_or_404(Customer, pk=pk)
    own = list(customer.cars.select_related("customer"))
    context = {"customer": customer, "lines": car_lines(own), "may_write": request.member.may(WRITE)}
    return render(request, "garage/customer.html", context)


def _page(request: HttpRequest, form, title: str, back: str, *, theirs=None, status: int = 200) -> HttpResponse:
    context = {"form": form, "title": title, "back": back, "theirs": theirs, "may_write": request.member.may(WRITE)}
    return render(request, "garage/form.html", context, status=status)


@form_view(WRITE)
def add_customer(request: HttpRequest) -> HttpResponse:
    form = CustomerForm(request.POST or None)
    if request.method == "POST" and form.is_valid():
        customer = services.add(request.member, form.save(commit=False))
        messages.success(request, f"{customer} is a customer now.")
        return redirect("garage:customer", customer.pk)
    return _page(request, form, "New customer", "/customers/", status=REFUSED if form.is_bound else 200)


@form_view(WRITE)
def add_car(request: HttpRequest) -> HttpResponse:
    asked = request.GET.get("customer", "")
    initial = {"customer": int(asked)} if asked.isdecimal() and len(asked) < 18 else {}
    form = CarForm(request.POST or None, initial=initial)
    if request.method == "POST" and form.is_valid():
        car = services.add(request.member, form.save(commit=False))
        messages.success(request, f"{car} is in the ledger. Next: measure it.")
        return redirect("garage:car", car.pk)
    return _page(request, form, "New car", "/cars/", status=REFUSED if form.is_bound else 200)


def _edit(request: HttpRequest, row: Car | Customer, form_class, back: str) -> HttpResponse:
    title = f"Change {row}"
    if request.method != "POST":
        return _page(request, form_class(instance=row, initial={"version": row.version}), title, back)
    seen = row.version
    form = form_class(request.POST, instance=row)
    if not form.is_valid():
        return _page(request, form, title, back, status=REFUSED)
    fields = {name: form.cleaned_data[name] for name in form.Meta.fields}
    try:
        services.change(request.member, row, form.cleaned_data["version"] or 0, fields)
    except Stale as stale:
        theirs = [(form.fields[name].label or name, getattr(stale.row, name)) for name in form.Meta.fields
                  if getattr(stale.row, name) != fields[name]]
        form.data = form.data.copy()
        form.data["version"] = seen
        return _page(request, form, title, back, theirs=theirs, status=409)
    messages.success(request, "Kept.")
    return redirect(back)


@form_view(WRITE)
def edit_customer(request: HttpRequest, pk: int) -> HttpResponse:
    return _edit(request, get_object_or_404(Customer, pk=pk), CustomerForm, f"/customers/{pk}/")


@form_view(WRITE)
def edit_car(request: HttpRequest, pk: int) -> HttpResponse:
    return _edit(request, get_object_or_404(Car, pk=pk), CarForm, f"/cars/{pk}/")


@action_view(WRITE)
def put_away_car(request: HttpRequest, pk: int) -> HttpResponse:
    car = get_object_or_404(Car, pk=pk)
    services.archive(request.member, car, away=car.archived_at is None)
    messages.success(request, f"{car} is {'put away' if car.archived_at is None else 'back'}; nothing of it is lost.")
    return redirect("garage:car", pk)


@action_view(WRITE)
def put_away_customer(request: HttpRequest, pk: int) -> HttpResponse:
    customer = get_object_or_404(Customer, pk=pk)
    services.archive(request.member, customer, away=customer.archived_at is None)
    messages.success(request, f"{customer} is {'put away' if customer.archived_at is None else 'back'}.")
    return redirect("garage:customer", pk)
