// Keeps what a person has typed: across an expired session, and against leaving by accident.
(function () {
  const key = (form) => "typed:" + location.pathname + ":" + (form.id || form.action);

  function remember(form) {
    const typed = {};
    for (const field of form.elements) {
      if (!field.name || field.type === "hidden" || field.type === "password" || field.type === "file") continue;
      if ((field.type === "checkbox" || field.type === "radio") && !field.checked) continue;
      typed[field.name] = field.value;
    }
    sessionStorage.setItem(key(form), JSON.stringify(typed));
  }

  function restore(form) {
    const kept = sessionStorage.getItem(key(form));
    if (!kept || form.dataset.fresh === "no") return;
    const typed = JSON.parse(kept);
    for (const field of form.elements) {
      if (!(field.name in typed) || field.type === "hidden") continue;
      if (field.type === "radio" || field.type === "checkbox") field.checked = field.value === typed[field.name];
      else field.value = typed[field.name];
    }
    form.dataset.unsaved = "yes";
  }

  document.addEventListener("DOMContentLoaded", function () {
    for (const form of document.querySelectorAll("form[data-keep]")) {
      restore(form);
      form.addEventListener("input", function () {
        form.dataset.unsaved = "yes";
        remember(form);
      });
      form.addEventListener("submit", function () {
        // What was typed stays until a page without this form shows that it was taken.
        form.dataset.unsaved = "";
        sessionStorage.setItem("sent", key(form));
      });
    }
    const sent = sessionStorage.getItem("sent");
    if (sent && !Array.from(document.querySelectorAll("form[data-keep]")).some((form) => key(form) === sent)) {
      if (!document.querySelector("form[data-sign-in]")) {
        sessionStorage.removeItem(sent);
        sessionStorage.removeItem("sent");
      }
    }
  });

  addEventListener("beforeunload", function (event) {
    if (document.querySelector('form[data-unsaved="yes"]')) event.preventDefault();
  });
})();
