import './stub.css';
import { createApp } from 'vue';
import StubApp from './StubApp.vue';

const token = decodeURIComponent(window.location.pathname.split('/')[2] ?? '');
createApp(StubApp, { token }).mount('#stub');
