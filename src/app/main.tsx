import { render } from 'solid-js/web'
import { App } from './App'
import './look/tokens.css'
import './look/page.css'
import './look/figure.css'
import './look/editing.css'
import './look/print.css'
import { createStudyDesk } from './studyDesk'
import { startWorker } from './worker/client'

const desk = createStudyDesk(startWorker((message) => desk.refuse('The program', `it stopped: ${message}`)))
const root = document.getElementById('app')
if (root === null) throw new RangeError('the page has no #app')
render(() => <App desk={desk} />, root)
