from django.urls import path

from shop.people.views import members, shop_page, sign_in

app_name = "people"

urlpatterns = [
    path("sign-in", sign_in.sign_in, name="sign-in"),
    path("sign-out", sign_in.sign_out, name="sign-out"),
    path("welcome/<uidb64>/<token>/", sign_in.welcome, name="welcome"),
    path("shop/password", sign_in.change_password, name="change-password"),
    path("shop/choose/<int:pk>", sign_in.choose_shop, name="choose-shop"),
    path("shop/", shop_page.shop, name="shop"),
    path("shop/members", members.members, name="members"),
    path("shop/members/<int:pk>/role", members.role, name="role"),
    path("shop/members/<int:pk>/remove", members.remove, name="remove"),
    path("shop/log", shop_page.log, name="log"),
    path("shop/keys", shop_page.make_token, name="make-token"),
    path("shop/keys/<int:pk>/revoke", shop_page.revoke_token, name="revoke-token"),
]
