// Keeps what a person has typed: across an expired sign-in, a broken connection, and against leaving by accident.
(function () {
  const key = (form) => "typed:" + location.pathname + ":" + (form.id || form.getAttribute("action") || "");
  const kept = (field) => field.name && !["hidden", "password", "file", "submit", "button"].includes(field.type);
  const ticked = (field) => field.type === "checkbox" || field.type === "radio";

  // Name of each field -> the values it holds; several for boxes that share a name, none for those all left empty.
  function typedIn(form) {
    const typed = {};
    for (const field of form.elements) {
      if (!kept(field)) continue;
      const values = (typed[field.name] ??= []);
      if (field.multiple && field.options) values.push(...Array.from(field.selectedOptions, (option) => option.value));
      else if (!ticked(field) || field.checked) values.push(field.value);
    }
    return typed;
  }

  function putBack(form, typed) {
    const used = {};
    for (const field of form.elements) {
      if (!kept(field) || !(field.name in typed)) continue;
      const values = typed[field.name];
      if (ticked(field)) field.checked = values.includes(field.value);
      else if (field.multiple && field.options) for (const option of field.options) option.selected = values.includes(option.value);
      else field.value = values[(used[field.name] = (used[field.name] ?? -1) + 1)] ?? field.value;
    }
    // What a page works out from its form is worked out anew.
    form.dispatchEvent(new Event("change", { bubbles: true }));
  }

  function remember(form) {
    try {
      sessionStorage.setItem(key(form), JSON.stringify(typedIn(form)));
    } catch {
      // The browser keeps nothing here (full, or forbidden); the warning before leaving still stands.
    }
  }

  function sayRestored(form) {
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = "Use what is stored instead";
    button.addEventListener("click", function () {
      sessionStorage.removeItem(key(form));
      form.dataset.unsaved = "";
      location.reload();
    });
    const notice = document.createElement("p");
    notice.className = "notice restored";
    notice.setAttribute("role", "status");
    notice.append("What you had typed here was put back; it is not saved yet.", button);
    form.before(notice);
  }

  function restore(form) {
    let typed = null;
    try {
      typed = JSON.parse(sessionStorage.getItem(key(form)));
    } catch {
      sessionStorage.removeItem(key(form));
    }
    if (!typed) return;
    form.dataset.unsaved = "yes";
    // The same where the server has refused the form and sent it back with all it held.
    if (JSON.stringify(typed) === JSON.stringify(typedIn(form))) return;
    putBack(form, typed);
    sayRestored(form);
  }

  // A form that was sent is done with once a page without it is shown, or one that says it was taken.
  function forgetTaken(forms) {
    const sent = sessionStorage.getItem("sent");
    if (!sent || document.querySelector("form[data-sign-in]")) return;
    const here = forms.some((form) => key(form) === sent);
    if (here && !document.querySelector(".messages .success")) return;
    sessionStorage.removeItem(sent);
    sessionStorage.removeItem("sent");
  }

  document.addEventListener("DOMContentLoaded", function () {
    const forms = Array.from(document.querySelectorAll("form[data-keep]"));
    forgetTaken(forms);
    for (const form of forms) {
      restore(form);
      for (const change of ["input", "change"]) {
        form.addEventListener(change, function (event) {
          if (event.target === form) return;
          form.dataset.unsaved = "yes";
          remember(form);
        });
      }
      form.addEventListener("submit", function () {
        form.dataset.unsaved = "";
        remember(form);
        sessionStorage.setItem("sent", key(form));
      });
    }
  });

  addEventListener("beforeunload", function (event) {
    if (document.querySelector('form[data-unsaved="yes"]')) event.preventDefault();
  });
})();
