// A page that is open while its section file is watched: it looks every second whether the file beside it
// tells of another text, and keeps what is set on the sheet over the reload.

(() => {
  const news = document.createElement("pre");
  news.id = "news";
  news.setAttribute("role", "alert");
  news.hidden = true;
  document.body.prepend(news);
  document.addEventListener("sheet", ({ detail }) => sessionStorage.setItem("sheet", JSON.stringify(detail)));

  window.sectileState = ({ stamp, error }) => {
    news.hidden = !error;
    news.textContent = error || "";
    if (!error && stamp !== STAMP) location.reload();
  };

  // A page from disk may not fetch a file, but it may run one that lies beside it.
  const look = () => {
    const script = document.createElement("script");
    script.src = `${STATE}?${Date.now()}`;
    script.onload = script.onerror = () => {
      script.remove();
      setTimeout(look, 1000);
    };
    document.head.append(script);
  };
  look();
})();
