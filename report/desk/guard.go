package desk

import (
	"crypto/rand"
	"crypto/subtle"
	"encoding/base64"
	"net/http"
	"strings"
	"sync"
)

// maxBody is how much one request may send: decisions are small.
const maxBody = 1 << 20

// policy lets the page load what the desk serves and nothing else.
const policy = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; connect-src 'self'; " +
	"form-action 'none'; base-uri 'none'; frame-ancestors 'none'"

// guard decides who may talk to the desk. The address that is printed or opened
// holds a token that works once; it is exchanged for a cookie named with the
// port, since cookies of 127.0.0.1 go to every port. Writes also need the token
// of the page in a header, which no other site can read or send.
type guard struct {
	host    string // "127.0.0.1:port", the only Host served
	cookie  string // name of the cookie
	session string // its value
	write   string // the page's token for writes

	mu   sync.Mutex
	once string // the token in the address; empty when used
}

func newGuard(host string) *guard {
	return &guard{
		host:    host,
		cookie:  "halfspan-desk-" + host[strings.LastIndexByte(host, ':')+1:],
		session: secret(), write: secret(), once: secret(),
	}
}

// secret makes an unguessable word. crypto/rand.Read never fails: it stops the
// program where the system gives no randomness.
func secret() string {
	b := make([]byte, 32)
	rand.Read(b)
	return base64.RawURLEncoding.EncodeToString(b)
}

func same(a, b string) bool {
	return a != "" && subtle.ConstantTimeCompare([]byte(a), []byte(b)) == 1
}

// wrap checks every request before next sees it.
func (g *guard) wrap(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		head := w.Header()
		head.Set("Content-Security-Policy", policy)
		head.Set("X-Content-Type-Options", "nosniff")
		head.Set("Referrer-Policy", "no-referrer")
		head.Set("Cross-Origin-Resource-Policy", "same-origin")
		head.Set("Cross-Origin-Opener-Policy", "same-origin")
		head.Set("Cache-Control", "no-store")
		if r.Host != g.host {
			refuse(w, http.StatusMisdirectedRequest, "this desk answers only to "+g.host)
			return
		}
		if origin := r.Header.Get("Origin"); origin != "" && origin != "http://"+g.host {
			refuse(w, http.StatusForbidden, "requests from other sites are refused")
			return
		}
		if r.Method == http.MethodGet && r.URL.Path == "/open" {
			g.open(w, r)
			return
		}
		if c, err := r.Cookie(g.cookie); err != nil || !same(c.Value, g.session) {
			refuse(w, http.StatusUnauthorized, "open the desk by the address that \"halfspan desk\" printed; it works once, in one browser")
			return
		}
		switch r.Method {
		case http.MethodGet, http.MethodHead:
		case http.MethodPost:
			if r.Header.Get("Origin") == "" || !same(r.Header.Get("X-Desk-Token"), g.write) {
				refuse(w, http.StatusForbidden, "this page is of an earlier run of the desk: reload it")
				return
			}
			r.Body = http.MaxBytesReader(w, r.Body, maxBody)
		default:
			refuse(w, http.StatusMethodNotAllowed, "the desk reads with GET and writes with POST")
			return
		}
		next.ServeHTTP(w, r)
	})
}

// open exchanges the token of the address for the cookie. It answers with a page
// that goes on by itself, not with a redirect: a browser sends a SameSite=Strict
// cookie only on a navigation that the site itself began.
func (g *guard) open(w http.ResponseWriter, r *http.Request) {
	g.mu.Lock()
	ok := same(r.URL.Query().Get("token"), g.once)
	if ok {
		g.once = ""
	}
	g.mu.Unlock()
	if !ok {
		if c, err := r.Cookie(g.cookie); err != nil || !same(c.Value, g.session) {
			refuse(w, http.StatusUnauthorized, "this address was used before or is of another run: start \"halfspan desk\" again")
			return
		}
	} else {
		http.SetCookie(w, &http.Cookie{Name: g.cookie, Value: g.session, Path: "/", HttpOnly: true, SameSite: http.SameSiteStrictMode})
	}
	w.Header().Set("Content-Type", "text/html; charset=utf-8")
	_, _ = w.Write([]byte("<!DOCTYPE html><meta charset=utf-8><meta http-equiv=refresh content=\"0;url=/\"><title>halfspan desk</title><a href=\"/\">To the desk</a>\n"))
}

// address is what opens the desk, once.
func (g *guard) address() string {
	g.mu.Lock()
	defer g.mu.Unlock()
	return "http://" + g.host + "/open?token=" + g.once
}
