from django.urls import path

from shop.sheets.views import links, sheet_page

app_name = "sheets"

urlpatterns = [
    path("revisions/<int:pk>/sheet", sheet_page.sheet, name="sheet"),
    path("revisions/<int:pk>/links", links.links, name="links"),
    path("sheets/links/<int:pk>/revoke", links.revoke, name="revoke"),
    path("s/<slug:token>", sheet_page.shared, name="shared"),
]
